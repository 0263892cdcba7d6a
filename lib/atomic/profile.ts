import { C_M_PER_S, K_B, M_U_KG } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import { faddeeva, faddeevaDerivative } from '@/lib/atomic/faddeeva'

const ROOT_LN2 = Math.sqrt(Math.LN2)

/** Gaussian and Lorentzian full widths at half maximum, in one unit. */
export interface Widths {
  gaussianFwhm: number
  lorentzianFwhm: number
}

function checkWidths({ gaussianFwhm, lorentzianFwhm }: Widths): void {
  const fine = gaussianFwhm >= 0 && lorentzianFwhm >= 0 && Number.isFinite(gaussianFwhm) && Number.isFinite(lorentzianFwhm)
  if (!fine || gaussianFwhm + lorentzianFwhm === 0) {
    throw new PhysicsError('profile_no_width', 'A profile needs a width: give a temperature with a mass, a microturbulence, an instrument width or a Lorentzian width above zero.', 'widths')
  }
}

/**
 * Voigt profile of unit area at a distance from its centre, the convolution of a Gaussian and a Lorentzian given by their full widths at half
 * maximum (either may be 0): 2 sqrt(ln2/pi)/G Re w((2d + iL) sqrt(ln2)/G). W. Voigt (1912); Abramowitz & Stegun 7.4.13.
 */
export function voigt(distance: number, { gaussianFwhm, lorentzianFwhm }: Widths): number {
  if (gaussianFwhm === 0) return lorentzianFwhm / (2 * Math.PI * (distance * distance + (lorentzianFwhm * lorentzianFwhm) / 4))
  const scale = (2 * ROOT_LN2) / gaussianFwhm
  const x = Math.abs(distance) * scale
  const shape = lorentzianFwhm === 0 ? Math.exp(-x * x) : faddeeva(x, (lorentzianFwhm * scale) / 2).real
  return (scale / Math.sqrt(Math.PI)) * shape
}

/** Derivatives of the Voigt profile with respect to the distance and to both widths; for fits. The Gaussian width must be above 0. */
export function voigtDerivatives(distance: number, { gaussianFwhm, lorentzianFwhm }: Widths): { distance: number; gaussianFwhm: number; lorentzianFwhm: number } {
  const scale = (2 * ROOT_LN2) / gaussianFwhm
  const [x, y] = [distance * scale, (lorentzianFwhm * scale) / 2]
  const mirrored = x < 0 ? -1 : 1
  const w = faddeeva(Math.abs(x), y)
  const slope = faddeevaDerivative(Math.abs(x), y, w)
  // Re w is even in x: dRe/dx = Re w', dRe/dy = -Im w'
  const [byX, byY, height] = [mirrored * slope.real, -slope.imaginary, scale / Math.sqrt(Math.PI)]
  return {
    distance: height * scale * byX,
    gaussianFwhm: (-height * (w.real + x * byX + y * byY)) / gaussianFwhm,
    lorentzianFwhm: (height * scale * byY) / 2,
  }
}

/** Full width at half maximum of a Voigt profile, by root finding to rounding from the estimate of Olivero & Longbothum, JQSRT 17, 233 (1977). */
export function voigtFwhm(widths: Widths): number {
  checkWidths(widths)
  const { gaussianFwhm, lorentzianFwhm } = widths
  if (gaussianFwhm === 0) return lorentzianFwhm
  if (lorentzianFwhm === 0) return gaussianFwhm
  const half = voigt(0, widths) / 2
  let [low, high] = [0, gaussianFwhm + lorentzianFwhm]
  let place = (0.5346 * lorentzianFwhm + Math.sqrt(0.2166 * lorentzianFwhm ** 2 + gaussianFwhm ** 2)) / 2
  for (let step = 0; step < 100; step += 1) {
    const excess = voigt(place, widths) - half
    if (excess > 0) low = place
    else high = place
    const newton = place - excess / voigtDerivatives(place, widths).distance
    const next = newton > low && newton < high ? newton : (low + high) / 2
    if (Math.abs(next - place) <= 1e-15 * place) return 2 * next
    place = next
  }
  return 2 * place
}

/** What broadens a line. */
export interface Broadening {
  wavenumberInvcm: number
  temperatureK?: number
  /** Mass of the atom, u; needed with a temperature. */
  massU?: number
  /** Most probable speed of microturbulence, m/s. */
  microturbulenceMPerS?: number
  /** The instrument as a width, or as a resolving power; not both. */
  instrumentFwhmInvcm?: number
  resolvingPower?: number
  lorentzianFwhmInvcm?: number
}

/** Doppler FWHM over the wavenumber: sqrt(4 ln2 (2kT/M + xi^2))/c, xi the most probable speed of microturbulence. */
export function dopplerRatio({ temperatureK = 0, massU, microturbulenceMPerS = 0 }: Omit<Broadening, 'wavenumberInvcm'>): number {
  if (temperatureK > 0 && !(massU !== undefined && massU > 0)) throw new PhysicsError('mass_unknown', 'A temperature broadens a line according to the mass of the atom; give the mass in u or name an isotope.', 'mass_u')
  const thermal = temperatureK > 0 && massU !== undefined ? (2 * K_B * temperatureK) / (massU * M_U_KG) : 0
  return Math.sqrt(4 * Math.LN2 * (thermal + microturbulenceMPerS * microturbulenceMPerS)) / C_M_PER_S
}

/**
 * Widths of a line in cm^-1: Gaussian FWHM^2 = 4 ln2 (2kT/M + xi^2)(sigma/c)^2 + instrument FWHM^2, with the instrument as a width or as
 * sigma over its resolving power; Lorentzian as given. Throws `profile_no_width` where all are 0, `mass_unknown`, `instrument_twice`.
 */
export function lineWidths(of: Broadening): Widths {
  if (of.instrumentFwhmInvcm !== undefined && of.resolvingPower !== undefined) {
    throw new PhysicsError('instrument_twice', 'Give the instrument as a width or as a resolving power, not both.', 'resolving_power')
  }
  const instrument = of.resolvingPower === undefined ? (of.instrumentFwhmInvcm ?? 0) : of.wavenumberInvcm / of.resolvingPower
  const widths = { gaussianFwhm: Math.hypot(dopplerRatio(of) * of.wavenumberInvcm, instrument), lorentzianFwhm: of.lorentzianFwhmInvcm ?? 0 }
  checkWidths(widths)
  return widths
}
