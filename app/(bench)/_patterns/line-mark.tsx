type Shape = (x: number, y: number, r: number) => string

const around = (x: number, y: number, r: number, corners: number, turn: number): string =>
  `M${Array.from({ length: corners }, (_, i) => {
    const angle = turn + (2 * Math.PI * i) / corners
    return `${(x + r * Math.sin(angle)).toFixed(1)},${(y - r * Math.cos(angle)).toFixed(1)}`
  }).join('L')}Z`

const star: Shape = (x, y, r) =>
  `M${Array.from({ length: 10 }, (_, i) => {
    const [angle, reach] = [(Math.PI * i) / 5, i % 2 === 0 ? 1.25 * r : 0.5 * r]
    return `${(x + reach * Math.sin(angle)).toFixed(1)},${(y - reach * Math.cos(angle)).toFixed(1)}`
  }).join('L')}Z`

const cross = (turn: number): Shape => (x, y, r) => {
  const [long, thick] = [1.1 * r, 0.38 * r]
  const corners = [[-thick, -long], [thick, -long], [thick, -thick], [long, -thick], [long, thick], [thick, thick], [thick, long], [-thick, long], [-thick, thick], [-long, thick], [-long, -thick], [-thick, -thick]] as const
  return `M${corners.map(([dx, dy]) => `${(x + dx * Math.cos(turn) - dy * Math.sin(turn)).toFixed(1)},${(y + dx * Math.sin(turn) + dy * Math.cos(turn)).toFixed(1)}`).join('L')}Z`
}

/** One shape for each line of a picture, so that lines are told apart where colour already tells the polarisation. */
const SHAPES: readonly Shape[] = [
  (x, y, r) => `M${(x - r).toFixed(1)},${y.toFixed(1)}a${r},${r} 0 1 0 ${2 * r},0a${r},${r} 0 1 0 ${-2 * r},0Z`,
  (x, y, r) => around(x, y, 1.2 * r, 4, Math.PI / 4),
  (x, y, r) => around(x, y, 1.25 * r, 3, 0),
  (x, y, r) => around(x, y, 1.3 * r, 4, 0),
  (x, y, r) => around(x, y, 1.25 * r, 3, Math.PI),
  cross(0),
  star,
  (x, y, r) => around(x, y, 1.1 * r, 6, 0),
  cross(Math.PI / 4),
  (x, y, r) => around(x, y, 1.15 * r, 5, Math.PI),
]

/** The path of a line's mark about a point; after ten lines the shapes come again, and the number tells. */
export const lineMark = (line: number, x: number, y: number, r = 4): string => (SHAPES[line % SHAPES.length] as Shape)(x, y, r)

/** A line's mark with its number, for lists and tables. */
export function LineSign({ line }: { line: number }) {
  return (
    <span className="inline-flex items-center gap-1.5">
      <svg viewBox="0 0 14 14" width={14} height={14} aria-hidden="true" className="shrink-0">
        <path d={lineMark(line, 7, 7, 4.4)} fill="var(--ink)" />
      </svg>
      <span className="num">{line + 1}</span>
    </span>
  )
}
