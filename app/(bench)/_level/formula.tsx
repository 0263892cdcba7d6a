import { Fragment } from 'react'
import { trueMinus } from '@/lib/units/print'

/** A formula that comes as plain text (`g_J = g_L [J(J+1) - ...] x 2`), set with true subscripts, minus and times signs. */
export function Formula({ text }: { text: string }) {
  const set = trueMinus(text).replace(/(\s|\))-(?=\s|[A-Z(])/g, '$1−').replace(/ x /g, ' × ')
  return set.split(/\b(g_[A-Za-z0-9])\b/).map((piece, index) =>
    /^g_[A-Za-z0-9]$/.test(piece) ? (
      <Fragment key={index}>
        <i>g</i>
        <sub>{piece.slice(2)}</sub>
      </Fragment>
    ) : (
      <Fragment key={index}>{piece}</Fragment>
    ),
  )
}
