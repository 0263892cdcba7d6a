import { PhysicsError } from '@/lib/atomic/errors'

export interface Ring {
  radius: number
  radiusUnc: number | null
}

/**
 * Offsets in wavenumber of rings of one interference order from the first of them: with parallel plates 2 n t cos(theta) sigma is constant, so to
 * first order in the small angles radius^2 grows linearly with wavenumber, one free spectral range for the step of radius^2 from order to
 * order. Radii in any unit of length, the step in its square. C. Fabry & A. Perot (1899); e.g. Hecht, Optics, ch. 9.
 */
export function ringOffsets(rings: readonly Ring[], squareStep: number, freeSpectralRangeInvcm: number): { offsetInvcm: number; uncInvcm: number | null }[] {
  if (!(squareStep > 0) || !(freeSpectralRangeInvcm > 0)) throw new PhysicsError('etalon_malformed', 'An etalon needs a step of radius squared from order to order and a free spectral range, both above zero.', 'etalon')
  const perSquare = freeSpectralRangeInvcm / squareStep
  const first = rings[0]?.radius ?? 0
  return rings.map(({ radius, radiusUnc }) => ({
    offsetInvcm: (radius - first) * (radius + first) * perSquare,
    uncInvcm: radiusUnc === null ? null : 2 * Math.abs(radius) * radiusUnc * perSquare,
  }))
}

/** Free spectral range of a plane etalon, cm^-1: 1/(2 n t), thickness in mm. */
export const freeSpectralRange = (thicknessMm: number, refractiveIndex: number): number => 10 / (2 * refractiveIndex * thicknessMm)

/** The step of radius squared from rings of one component in successive orders, by least squares of radius^2 on the order, with its deviation from the scatter. */
export function squareStepOf(radii: readonly number[]): { step: number; unc: number | null } {
  if (radii.length < 2) throw new PhysicsError('etalon_malformed', 'The step of radius squared needs rings of at least two orders.', 'etalon')
  const squares = radii.map((radius) => radius * radius)
  const [n, middle] = [squares.length, (squares.length - 1) / 2]
  const mean = squares.reduce((sum, value) => sum + value, 0) / n
  const spread = squares.reduce((sum, _, p) => sum + (p - middle) ** 2, 0)
  const step = squares.reduce((sum, value, p) => sum + (p - middle) * (value - mean), 0) / spread
  if (n === 2) return { step, unc: null }
  const scatter = squares.reduce((sum, value, p) => sum + (value - mean - step * (p - middle)) ** 2, 0) / (n - 2)
  return { step, unc: Math.sqrt(scatter / spread) }
}
