import { memo } from 'react'
import type { Validity } from '@/openapi/schemas/validity'
import { Notice } from '@/app/_components/notice'
import { halves, significant } from '@/app/_components/number'
import { Part } from '@/app/_components/page-head'
import { worse } from './verdict-words'

const WORD = { valid: 'good', not_valid: 'not good', unknown: 'not known' } as const
const TONE = { valid: 'good', not_valid: 'warn', unknown: 'info' } as const
const TINT = { valid: 'text-good', not_valid: 'text-warn', unknown: 'text-muted' } as const

const percent = (value: number | null): string => (value === null ? 'not known' : `${significant(value * 100, 2)} %`)
const tesla = (value: number | null, status: keyof typeof WORD): string =>
  value === null ? (status === 'unknown' ? 'not known' : 'never, up to 10 000 T') : value === 0 ? 'any field' : `${significant(value, 3)} T`

interface Row {
  name: string
  status: keyof typeof WORD
  invcm: number | null
  relative: number | null
  against: string
  limit: number | null
}

/** How far the linear law may be trusted here, positions and strengths apart, and the two levels it follows from. */
export const ValidityPart = memo(function ValidityPart({ validity, fieldTesla, model }: { validity: Validity; fieldTesla: number; model: 'linear' | 'intermediate' | 'hyperfine' }) {
  const { positions, strengths, blend, levels } = validity
  const blended = blend.lines.length > 1
  const missing = [...levels.lower.missing_j, ...levels.upper.missing_j]
  const rows: Row[] = [
    { name: 'Positions of the line', status: positions.status, invcm: positions.error_invcm, relative: positions.relative_error, against: 'largest shift', limit: positions.field_limit_tesla },
    { name: 'Strengths of the line', status: strengths.status, invcm: null, relative: strengths.relative_error, against: 'largest in its q', limit: strengths.field_limit_tesla },
    ...(blended ? [{ name: `Centre of the blend of ${blend.lines.length} lines`, status: blend.status, invcm: blend.error_invcm, relative: blend.relative_error, against: 'largest displacement of a centre', limit: blend.field_limit_tesla }] : []),
    ...(['lower', 'upper'] as const).map((end): Row => ({ name: `Positions of the ${end} level`, status: levels[end].status, invcm: levels[end].error_invcm, relative: levels[end].relative_error, against: `μB·B${levels[end].relative_to_shift === null ? '' : `; ${percent(levels[end].relative_to_shift)} of its own largest shift`}`, limit: levels[end].field_limit_tesla })),
  ]
  return (
    <Part title="How far the linear law holds" aside={`At ${fieldTesla}\u202fT, tolerance ${percent(positions.tolerance)}`}>
      <Notice tone={model === 'intermediate' ? 'info' : TONE[worse(positions.status, strengths.status)]}>
        {model === 'intermediate' ? <p>The numbers above are diagonalised and do not rest on the linear law; this is how far that law would be off.</p> : null}
        <p>{validity.sentence}</p>
      </Notice>
      <div className="scroll-x mt-4" tabIndex={0} role="region" aria-label="Errors of the linear law, scrolls sideways">
        <table className="ruled">
          <caption className="sr-only">Errors of the linear law at {fieldTesla} T</caption>
          <thead>
            <tr>
              <th scope="col">What</th>
              <th scope="col">Linear is</th>
              <th scope="col" className="right">Error, cm<sup>−1</sup></th>
              <th scope="col" className="right">Relative error</th>
              <th scope="col">as a part of</th>
              <th scope="col" className="right">Passes the tolerance at</th>
            </tr>
          </thead>
          <tbody>
            {rows.map((row) => (
              <tr key={row.name}>
                <th scope="row">{row.name}</th>
                <td className={TINT[row.status]}>{WORD[row.status]}</td>
                <td className="right">{row.invcm === null ? '' : significant(row.invcm, 3)}</td>
                <td className="right">{`${row.status === 'unknown' && row.relative !== null ? 'at least ' : ''}${percent(row.relative)}`}</td>
                <td className="text-muted">{row.against}</td>
                <td className="right">{tesla(row.limit, row.status)}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      <p className="note mt-2">
        Method: {validity.method}.
        {blended ? ` Seen in one at an ordinary resolving power: ${blend.lines.map((line) => line.transition ?? `J = ${halves(line.j_lower)} – ${halves(line.j_upper)}`).join(', ')}.` : ''}
        {missing.length > 0 ? ` The table holds no level with J = ${missing.map(halves).join(', ')} of these terms, so the judgement is a lower bound.` : ''}
      </p>
    </Part>
  )
})
