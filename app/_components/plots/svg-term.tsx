import { trueMinus } from '@/lib/units/print'

/** Raised and lowered text inside an SVG text element; `dy` is relative, so each piece undoes the shift of the one before. */
type Piece = { text: string; place: -1 | 0 | 1 }

const RAISED = '⁰¹²³⁴⁵⁶⁷⁸⁹'

/** An ASCII term symbol in pieces: multiplicity raised, J lowered, the star of odd parity as a degree sign. */
export function termPieces(symbol: string): Piece[] {
  const found = /^(\d*)((?<=\d)[A-Z]|\[[^\]]+\]|\([^)]+\))(\*?)(.*)$/.exec(symbol)
  if (!found) return [{ text: symbol, place: 0 }]
  const [, multiplicity = '', body = '', odd = '', j = ''] = found
  const pieces: Piece[] = [
    { text: multiplicity, place: -1 },
    { text: `${body.replace(',', ',\u2009')}${odd ? '°' : ''}`, place: 0 },
    { text: trueMinus(j), place: 1 },
  ]
  return pieces.filter((piece) => piece.text !== '')
}

/** A configuration in text: raised counts, thin spaces between shells, parents in parentheses. */
export const configurationText = (configuration: string): string =>
  configuration
    .split('.')
    .map((part) => part.replace(/^(\d+[a-z])(\d+)$/, (_, orbital: string, count: string) => orbital + [...count].map((d) => RAISED[Number(d)] ?? '').join('')).replace(/\*/g, '°'))
    .join('\u2009')

/** A term symbol (and what stands before it) as tspans for an SVG text set at `size` px. */
export function SvgTerm({ symbol, before = '', size }: { symbol: string; before?: string; size: number }) {
  const pieces = termPieces(symbol)
  const shift = { [-1]: -0.42 * size, 0: 0, 1: 0.24 * size }
  return (
    <>
      {before && <tspan>{`${before} `}</tspan>}
      {pieces.map(({ text, place }, index) => (
        <tspan key={index} dy={shift[place] - (index === 0 ? 0 : shift[pieces[index - 1]?.place ?? 0])} fontSize={place === 0 ? size : size * 0.7}>
          {text}
        </tspan>
      ))}
    </>
  )
}
