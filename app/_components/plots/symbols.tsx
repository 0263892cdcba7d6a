import { trueMinus } from '@/lib/units/print'

/** Text with `m_F`, `M_L` and their like set with true subscripts and minus signs. */
export function Symbols({ text }: { text: string }) {
  return trueMinus(text).split(/(_[A-Z])/).map((piece, index) => (piece.startsWith('_') ? <sub key={index}>{piece.slice(1)}</sub> : piece))
}
