import { AIR_FROM_NM, DEFAULT_AIR_FORMULA, refractivity, refractivitySlope } from '@/lib/atomic/air'
import { GHZ_PER_INVCM } from '@/lib/atomic/constants'
import { termSolution, type TermSolution } from '@/lib/atomic/field-solver'
import { type MultipletSweep, sweepDerivatives, type SweepPart, sweepShifts, sweepStrengths, sweepTerm, termSweep } from '@/lib/atomic/field-sweep'
import type { PredictionOptions } from '@/lib/prediction/bulk/block'
import { hasStrengths, type PreparedBlock } from '@/lib/prediction/bulk/prepared'
import { thzOfWavenumber, vacuumNmOfWavenumber } from '@/lib/units/spectral'
import type { PredictionQuantity } from '@/openapi/schemas/predictions'

export type ColumnName = 'value' | 'derivative' | 'strength' | 'intensity'

/** Units of values as Arrow's field metadata tells them. */
export const QUANTITY_UNITS: Record<PredictionQuantity, string> = { wavenumber_invcm: 'cm^-1', shift_invcm: 'cm^-1', wavelength_vac_nm: 'nm', wavelength_air_nm: 'nm', frequency_thz: 'THz', shift_ghz: 'GHz' }

/** Quantities that do not exist everywhere: their holes are NaN in here and null outside. */
export const mayHaveHoles = (quantity: PredictionQuantity): boolean => quantity === 'wavelength_vac_nm' || quantity === 'wavelength_air_nm'

const NM_WITHOUT = Number.NaN

/** Shifts (cm^-1) to the quantity asked, in place; a loop for each, since this is what all values go through. */
function convertValues(quantity: PredictionQuantity, centre: number, values: Float64Array, at: number, count: number): void {
  const to = at + count
  switch (quantity) {
    case 'shift_invcm':
      return
    case 'wavenumber_invcm':
      for (let i = at; i < to; i += 1) values[i] = centre + (values[i] as number)
      return
    case 'shift_ghz':
      for (let i = at; i < to; i += 1) values[i] = (values[i] as number) * GHZ_PER_INVCM
      return
    case 'frequency_thz':
      for (let i = at; i < to; i += 1) values[i] = thzOfWavenumber(centre + (values[i] as number))
      return
    default:
      for (let i = at; i < to; i += 1) values[i] = wavelengthOf(quantity, centre + (values[i] as number))
  }
}

function wavelengthOf(quantity: PredictionQuantity, wavenumber: number): number {
  if (!(wavenumber > 0)) return NM_WITHOUT
  const vacuum = vacuumNmOfWavenumber(wavenumber)
  if (quantity === 'wavelength_vac_nm') return vacuum
  return vacuum >= AIR_FROM_NM ? vacuum / (1 + refractivity(DEFAULT_AIR_FORMULA, vacuum)) : NM_WITHOUT
}

/** d(quantity)/d(wavenumber). */
function slopeOf(quantity: PredictionQuantity, wavenumber: number): number {
  switch (quantity) {
    case 'wavenumber_invcm':
    case 'shift_invcm':
      return 1
    case 'shift_ghz':
      return GHZ_PER_INVCM
    case 'frequency_thz':
      return thzOfWavenumber(1)
    default: {
      if (!(wavenumber > 0)) return NM_WITHOUT
      const vacuum = vacuumNmOfWavenumber(wavenumber)
      const slope = -vacuum / wavenumber
      if (quantity === 'wavelength_vac_nm') return slope
      if (!(vacuum >= AIR_FROM_NM)) return NM_WITHOUT
      // lambda/n: (n - lambda n')/n^2
      const n = 1 + refractivity(DEFAULT_AIR_FORMULA, vacuum)
      return (slope * (n - vacuum * refractivitySlope(DEFAULT_AIR_FORMULA, vacuum))) / (n * n)
    }
  }
}

/** Reads a prepared block over a grid of fields, one component at a time; of a diagonalised one the fields that were loaded. */
export class BlockReader {
  private readonly sweep: MultipletSweep | null
  private readonly rooms: { lower: TermSolution; upper: TermSolution } | null
  private readonly scratch: Float64Array
  /** Field that the first column of the sweep holds. */
  private origin = 0

  /** `columns`: how many fields are held at once; `longest`: how many one `fill` may ask for. */
  constructor(readonly block: PreparedBlock, private readonly options: PredictionOptions, private readonly fields: Float64Array, columns: number, longest: number) {
    const { diagonalised } = block
    this.scratch = mayHaveHoles(options.quantity) && options.derivatives ? new Float64Array(longest) : new Float64Array(0)
    if (diagonalised === null) {
      this.sweep = null
      this.rooms = null
      return
    }
    const { multiplet, needed } = diagonalised
    const wanted = { slopes: options.derivatives, vectors: options.strengths && diagonalised.factor !== null }
    this.sweep = { lower: termSweep(multiplet.lower, columns, wanted, needed), upper: termSweep(multiplet.upper, columns, wanted, needed) }
    this.rooms = { lower: termSolution(multiplet.lower), upper: termSolution(multiplet.upper) }
  }

  /** Which columns the block has to tell, in the order of every format. */
  get columns(): ColumnName[] {
    const { derivatives, strengths, thetaDeg } = this.options
    return ['value', ...(derivatives ? ['derivative' as const] : []), ...(strengths ? ['strength' as const] : []), ...(strengths && thetaDeg !== null ? ['intensity' as const] : [])]
  }

  /** Whether a column has numbers at all. */
  has(column: ColumnName): boolean {
    if (column === 'value' || column === 'derivative') return true
    return hasStrengths(this.block) && (column === 'strength' || this.block.angular !== null)
  }

  /** Solves the fields `from` .. `to`; with `origin` the sweep begins anew at that field. */
  load(from: number, to: number, origin: number): void {
    this.origin = origin
    const { diagonalised } = this.block
    if (diagonalised === null || this.sweep === null || this.rooms === null) return
    sweepTerm(diagonalised.multiplet.lower, this.fields, from, to, this.sweep.lower, from - origin, this.rooms.lower)
    sweepTerm(diagonalised.multiplet.upper, this.fields, from, to, this.sweep.upper, from - origin, this.rooms.upper)
  }

  /** One column of one component at the fields `from` .. `to` into `out` from `at` on. */
  fill(column: ColumnName, component: number, from: number, to: number, out: Float64Array, at: number): void {
    const part: SweepPart = { fieldsTesla: this.fields, from, to, column: from - this.origin }
    const centre = this.block.centres[component] as number
    if (column === 'value') {
      if (this.options.quantity === 'wavenumber_invcm' && this.block.linear !== null) return this.straight(centre, this.block.linear.slopes[component] as number, from, to, out, at)
      this.shifts(component, part, out, at)
      convertValues(this.options.quantity, centre, out, at, to - from)
    } else if (column === 'derivative') this.derivatives(component, part, centre, out, at)
    else {
      this.strengths(component, part, out, at)
      const factor = column === 'intensity' ? (this.block.angular?.[component] ?? 0) : 1
      if (factor !== 1) for (let i = at; i < at + to - from; i += 1) (out[i] as number) *= factor
    }
  }

  /** What is asked most, in one loop; the same sum as by way of the shifts. */
  private straight(centre: number, slope: number, from: number, to: number, out: Float64Array, at: number): void {
    const { fields } = this
    for (let f = from, i = at; f < to; f += 1, i += 1) out[i] = centre + slope * (fields[f] as number)
  }

  private shifts(component: number, part: SweepPart, out: Float64Array, at: number): void {
    const { linear, diagonalised } = this.block
    if (diagonalised !== null && this.sweep !== null) return sweepShifts(diagonalised.multiplet, this.sweep, diagonalised.components[component] as number, part, out, at)
    const slope = linear?.slopes[component] ?? 0
    const { fields } = this
    const { from, to } = part
    // a positive zero where nothing moves, so that every format gives the same bits
    for (let f = from, i = at; f < to; f += 1, i += 1) out[i] = slope * (fields[f] as number) + 0
  }

  private derivatives(component: number, part: SweepPart, centre: number, out: Float64Array, at: number): void {
    const { linear, diagonalised } = this.block
    const { quantity } = this.options
    const count = part.to - part.from
    if (diagonalised !== null && this.sweep !== null) sweepDerivatives(diagonalised.multiplet, this.sweep, diagonalised.components[component] as number, part, out, at)
    else out.fill((linear?.slopes[component] ?? 0) + 0, at, at + count)
    if (!mayHaveHoles(quantity)) {
      const factor = slopeOf(quantity, 0)
      if (factor !== 1) for (let i = at; i < at + count; i += 1) (out[i] as number) *= factor
      return
    }
    this.shifts(component, part, this.scratch, 0)
    for (let i = 0; i < count; i += 1) out[at + i] = (out[at + i] as number) * slopeOf(quantity, centre + (this.scratch[i] as number)) + 0
  }

  private strengths(component: number, part: SweepPart, out: Float64Array, at: number): void {
    const { linear, diagonalised } = this.block
    if (diagonalised !== null && this.sweep !== null) return sweepStrengths(diagonalised.multiplet, this.sweep, diagonalised.components[component] as number, part, diagonalised.factor ?? 0, out, at)
    out.fill(linear?.strengths?.[component] ?? 0, at, at + part.to - part.from)
  }
}
