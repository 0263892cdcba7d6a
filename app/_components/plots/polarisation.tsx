/** How each polarisation is drawn everywhere: a colour, a line style and a mark of its own, so colour is never the only sign. */
export interface PolarisationStyle {
  name: string
  colour: string
  dash: string | undefined
  width: number
  cap: 'butt' | 'round'
  /** The mark about (0, 0), some 10 px across: a diamond for π, arrowheads to the blue for σ+ and to the red for σ−. */
  mark: string
}

const PI: PolarisationStyle = { name: 'π', colour: 'var(--pi)', dash: undefined, width: 2.5, cap: 'butt', mark: 'M0,-5.5L5,0L0,5.5L-5,0Z' }
const SIGMA_PLUS: PolarisationStyle = { name: 'σ+', colour: 'var(--sigma-plus)', dash: '7 3', width: 2.5, cap: 'butt', mark: 'M-4,-5L5.5,0L-4,5Z' }
const SIGMA_MINUS: PolarisationStyle = { name: 'σ−', colour: 'var(--sigma-minus)', dash: '0.1 4.6', width: 3, cap: 'round', mark: 'M4,-5L-5.5,0L4,5Z' }

/** The style of a component by q = m_upper - m_lower; the quadrupole's q = ±2 take the σ of their sign. */
export const styleOf = (q: number): PolarisationStyle => (q === 0 ? PI : q > 0 ? SIGMA_PLUS : SIGMA_MINUS)

/** The name shown for a component's polarisation: π, σ+, σ−, and plainly q = ±2 for the quadrupole's outer ones. */
export const polarisationName = (q: number): string => (Math.abs(q) > 1 ? `q = ${q > 0 ? '+' : '−'}${Math.abs(q)}` : styleOf(q).name)

/** A small sample of a polarisation's stroke and mark, for keys and tables. */
export function PolarisationSign({ q, size = 22 }: { q: number; size?: number }) {
  const style = styleOf(q)
  return (
    <svg viewBox="0 0 22 14" width={size} height={(size * 14) / 22} aria-hidden="true" className="inline-block shrink-0 align-[-0.1em]">
      <path d="M0,7H22" stroke={style.colour} strokeWidth={style.width * 0.8} strokeDasharray={style.dash} strokeLinecap={style.cap} />
      <path d={style.mark} transform="translate(11 7)" fill={style.colour} stroke="var(--sheet)" strokeWidth={1} />
    </svg>
  )
}
