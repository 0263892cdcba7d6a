import { AIR_FROM_NM, airToVac, CONVENTIONAL_AIR_TO_NM, DEFAULT_AIR_FORMULA, refractivity, vacToAir } from '@/lib/atomic/air'
import { freeSpectralRange, ringOffsets, squareStepOf } from '@/lib/atomic/etalon'
import type { FieldFitMeasurement } from '@/lib/atomic/field-fit'
import type { Scale } from '@/lib/atomic/field-fit-problem'
import { twice } from '@/lib/prediction/levels'
import type { ReadLine } from '@/lib/prediction/field-fits/lines'
import type { Fault } from '@/lib/problem'
import { deviationToInvcm, separationToInvcm } from '@/lib/units/separation'
import type { FieldFitRequest } from '@/openapi/operations/field-fits'
import type { FitUnit } from '@/openapi/schemas/field-fits'
import type { Medium } from '@/openapi/schemas/common'

/** How the measured numbers of one line become wavenumbers. */
export interface LineScale {
  /** Null for units that are no wavelength. */
  medium: 'air' | 'vacuum' | null
  /** Wavenumber that separations are counted from; null for positions and rings. */
  referenceInvcm: number | null
}

/** Deviations smaller than this cannot be told from none in double precision, cm^-1. */
const SMALLEST_SIGMA = 1e-15
const LARGEST_INVCM = 1e9
/** Where the formula of air has its poles, no number is read as a wavelength in air, nm. */
const AIR_READ_FROM_NM = 190

const isWavelength = (unit: FitUnit | null): unit is 'nm' | 'pm' => unit === 'nm' || unit === 'pm'

function mediumOf(line: ReadLine, medium: Medium, pointer: string, faults: Fault[]): 'air' | 'vacuum' {
  const nm = line.facts.wavelength_vac_nm
  if (medium === 'vacuum') return 'vacuum'
  if (medium === 'air' && nm < AIR_FROM_NM) {
    faults.push({ pointer, code: 'air_not_applicable', detail: `Air wavelengths are given from ${AIR_FROM_NM} nm (vacuum) up, and ${line.name} lies below; give its positions in vacuum.` })
    return 'vacuum'
  }
  return medium === 'air' || (nm >= AIR_FROM_NM && nm <= CONVENTIONAL_AIR_TO_NM) ? 'air' : 'vacuum'
}

/** Medium and reference of each line: separations are counted from the centre of the line, or of the first that shares its zero. */
export function scalesOf(body: FieldFitRequest, lines: readonly (ReadLine | null)[], faults: Fault[]): (LineScale | null)[] {
  const unit = body.unit ?? null
  return lines.map((line, i): LineScale | null => {
    if (line === null) return null
    const first = line.fit.zero === undefined ? line : (lines.find((other) => other?.fit.zero === line.fit.zero) ?? line)
    return {
      medium: isWavelength(unit) ? mediumOf(line, body.medium ?? 'conventional', `/lines/${i}`, faults) : null,
      referenceInvcm: body.quantity === 'separations' ? first.fit.centreInvcm : null,
    }
  })
}

interface Placed { positionInvcm: number; sigmaInvcm: number | null }

/** One number in nm or pm as vacuum wavenumber (minus the reference's), with its deviation; a text says what is wrong. */
function placeOfWavelength(value: number, deviation: number | null, unit: 'nm' | 'pm', { medium, referenceInvcm }: LineScale): Placed | string {
  const perNm = unit === 'pm' ? 1000 : 1
  const n = (vacuumNm: number) => (medium === 'air' ? 1 + refractivity(DEFAULT_AIR_FORMULA, vacuumNm) : 1)
  if (referenceInvcm !== null && medium !== 'air') {
    const offset = separationToInvcm(value, unit, referenceInvcm)
    if (!(1e7 / referenceInvcm + value / perNm > 0)) return 'The separation reaches below a wavelength of zero.'
    return { positionInvcm: offset, sigmaInvcm: deviation === null ? null : deviationToInvcm(deviation, unit, referenceInvcm + offset) }
  }
  const given = value / perNm + (referenceInvcm === null ? 0 : vacToAir(1e7 / referenceInvcm))
  if (!(given > 0)) return 'A wavelength is above zero.'
  if (medium === 'air' && given < AIR_READ_FROM_NM) return `Air wavelengths are given from ${AIR_FROM_NM} nm up.`
  const vacuumNm = medium === 'air' ? airToVac(given) : given
  const wavenumber = 1e7 / vacuumNm
  return { positionInvcm: wavenumber - (referenceInvcm ?? 0), sigmaInvcm: deviation === null ? null : deviationToInvcm(deviation * n(vacuumNm), unit, wavenumber) }
}

function placeOf(value: number, deviation: number | null, unit: FitUnit, scale: LineScale): Placed | string {
  if (isWavelength(unit)) return placeOfWavelength(value, deviation, unit, scale)
  const positionInvcm = separationToInvcm(value, unit, 0)
  if (scale.referenceInvcm === null && !(positionInvcm > 0)) return 'A position in the spectrum is above zero; distances from a place in the line are quantity=separations.'
  return { positionInvcm, sigmaInvcm: deviation === null ? null : deviationToInvcm(deviation, unit, 0) }
}

/** An etalon as wavenumber per square of radius for the first line, and what is not known of it as a part of the scale. */
export interface ReadEtalon {
  freeSpectralRangeInvcm: number
  squareStep: number
  /** One standard deviation of the step and the range together, relative; 0 where none is stated. */
  relativeUnc: number
}

export function readEtalon(body: FieldFitRequest, faults: Fault[]): ReadEtalon | null {
  const { etalon } = body
  if (etalon === null || etalon === undefined) return null
  const fitted = etalon.order_radii ? squareStepOf(etalon.order_radii) : { step: etalon.square_step ?? 0, unc: null }
  if (!(fitted.step > 0)) {
    faults.push({ pointer: '/etalon/order_radii', code: 'etalon_malformed', detail: 'The radii of successive orders must grow from the inside out.' })
    return null
  }
  const thickness = etalon.thickness_mm ?? null
  const range = thickness === null ? (etalon.free_spectral_range_invcm ?? 0) : freeSpectralRange(thickness, etalon.refractive_index)
  const stepUnc = etalon.square_step_unc ?? fitted.unc ?? 0
  return { freeSpectralRangeInvcm: range, squareStep: fitted.step, relativeUnc: Math.hypot(stepUnc / fitted.step, (etalon.free_spectral_range_unc_invcm ?? 0) / range) }
}

function ringPlace(one: FieldFitRequest['measurements'][number], etalon: ReadEtalon, firstNm: number, ownNm: number): Placed | string {
  if (!(one.position > 0)) return 'The radius of a ring is above zero.'
  // radius^2 grows from order to order by f^2 lambda/(n t), so the step of another line is that of the first times the ratio of wavelengths
  const step = etalon.squareStep * (ownNm / firstNm)
  const [, ring] = ringOffsets([{ radius: 0, radiusUnc: null }, { radius: one.position, radiusUnc: one.position_unc ?? null }], step, etalon.freeSpectralRangeInvcm)
  return { positionInvcm: (ring?.offsetInvcm ?? 0) - (one.order ?? 0) * etalon.freeSpectralRangeInvcm, sigmaInvcm: ring?.uncInvcm ?? null }
}

/** The assignment of a measurement as the fit takes it. */
function assignment(one: FieldFitRequest['measurements'][number]): Partial<FieldFitMeasurement> {
  if (one.m_lower !== null && one.m_lower !== undefined && one.m_upper !== null && one.m_upper !== undefined) return { component: { twoMLower: twice(one.m_lower), twoMUpper: twice(one.m_upper) } }
  if (one.group !== null && one.group !== undefined) return { group: one.group }
  return one.q === null || one.q === undefined ? {} : { q: one.q }
}

function sigmaFaults(body: FieldFitRequest): Fault[] {
  const without = body.measurements.flatMap((one, i) => (one.position_unc === null || one.position_unc === undefined ? [i] : []))
  if (without.length === 0 || without.length === body.measurements.length) return []
  return without.map((i) => ({ pointer: `/measurements/${i}/position_unc`, code: 'sigma_for_some', detail: 'Other measurements have an uncertainty and this one has none: give it for all, or for none.' }))
}

/** The measurements in cm^-1; every fault found in any of them is added to `faults`. */
export function readMeasurements(body: FieldFitRequest, lines: readonly (ReadLine | null)[], scales: readonly (LineScale | null)[], etalon: ReadEtalon | null, faults: Fault[]): FieldFitMeasurement[] {
  faults.push(...sigmaFaults(body))
  const rings = body.quantity === 'ring_radii'
  if (rings) {
    body.lines.forEach((line, i) => {
      if (line.zero !== null && line.zero !== undefined) faults.push({ pointer: `/lines/${i}/zero`, code: 'etalon_malformed', detail: 'Rings of two lines do not tell how far apart the lines are, so each has a zero of its own; leave zero out.' })
    })
  }
  const firstNm = lines[0]?.facts.wavelength_vac_nm ?? 1
  return body.measurements.flatMap((one, i): FieldFitMeasurement[] => {
    const at = `/measurements/${i}`
    if (one.line >= body.lines.length) {
      faults.push({ pointer: `${at}/line`, code: 'no_such_line', detail: `There ${body.lines.length === 1 ? 'is one line, line 0' : `are lines 0 to ${body.lines.length - 1}`}; this names line ${one.line}.` })
      return []
    }
    if (!rings && (one.order ?? 0) > 0) faults.push({ pointer: `${at}/order`, code: 'unit_not_applicable', detail: 'Only rings of an etalon have an order.' })
    const [line, scale] = [lines[one.line], scales[one.line]]
    if (!line || !scale) return []
    const deviation = one.position_unc ?? null
    if (deviation !== null && !(deviation > 0)) {
      faults.push({ pointer: `${at}/position_unc`, code: 'sigma_not_positive', detail: 'The uncertainty of a position is above zero; leave it out everywhere to have it judged by the scatter.' })
      return []
    }
    const place = rings ? (etalon === null ? null : ringPlace(one, etalon, firstNm, line.facts.wavelength_vac_nm)) : placeOf(one.position, deviation, body.unit ?? 'cm-1', scale)
    if (place === null) return []
    if (typeof place === 'string') {
      faults.push({ pointer: `${at}/position`, code: 'spectral_not_positive', detail: place })
      return []
    }
    if (!(Math.abs(place.positionInvcm) <= LARGEST_INVCM)) {
      faults.push({ pointer: `${at}/position`, code: 'position_not_finite', detail: `This is ${place.positionInvcm.toExponential(2)} cm^-1, beyond what is computed here; check the unit.` })
      return []
    }
    if (place.sigmaInvcm !== null && !(place.sigmaInvcm >= SMALLEST_SIGMA && place.sigmaInvcm <= LARGEST_INVCM)) {
      faults.push({ pointer: `${at}/position_unc`, code: 'sigma_not_positive', detail: `This is ${place.sigmaInvcm.toExponential(2)} cm^-1, beyond what is computed here; check the unit.` })
      return []
    }
    return [{ line: one.line, ...place, ...assignment(one) }]
  })
}

/** The scale as the fit takes it: what is not known of the etalon is uncertainty of the scale. */
export function readScale(body: FieldFitRequest, etalon: ReadEtalon | null): Scale {
  const given = body.scale ?? null
  const value = given?.value ?? 1
  if (given?.free === true) return { value, unc: null }
  return { value, unc: Math.hypot(given?.unc ?? 0, value * (etalon?.relativeUnc ?? 0)) }
}

/** Refuses components that the line does not have, by name. */
export function componentFaults(body: FieldFitRequest, components: readonly (readonly { twoMLower: number; twoMUpper: number; q: number }[] | null)[]): Fault[] {
  return body.measurements.flatMap((one, i): Fault[] => {
    const own = components[one.line]
    if (!own) return []
    const at = `/measurements/${i}`
    const listed = () => [...new Set(own.map((component) => component.q))].sort((a, b) => a - b).join(', ')
    const { component, group, q } = assignment(one)
    if (component && !own.some((c) => c.twoMLower === component.twoMLower && c.twoMUpper === component.twoMUpper)) {
      return [{ pointer: `${at}/m_lower`, code: 'no_such_component', detail: `The line has no component from m_lower = ${one.m_lower} to m_upper = ${one.m_upper}.` }]
    }
    const wanted = group ?? (q === 'sigma' ? undefined : q)
    if (wanted !== undefined && !own.some((c) => c.q === wanted)) return [{ pointer: `${at}/${group === undefined ? 'q' : 'group'}`, code: 'no_such_component', detail: `The line has no components of q = ${wanted}; it has q = ${listed()}.` }]
    return []
  })
}
