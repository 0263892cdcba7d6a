import { fieldIn, type FieldUnit } from '@/lib/units/field'
import { superscript } from '../plots/ruler'

export interface FieldValue {
  tesla: number
  /** The unit it is shown and sent in. */
  unit: FieldUnit
}

/** The slider spans these powers of ten of a tesla, with as many stops to a power; the stop below them is zero field. */
const LOW = -5
const HIGH = 2
const STOPS = 100
export const LAST_STOP = (HIGH - LOW) * STOPS + 1

/** The field at a stop of the slider, to three significant figures so that what is shown is what is computed. */
export function teslaAt(stop: number): number {
  if (stop <= 0) return 0
  return Number((10 ** (LOW + (Math.min(stop, LAST_STOP) - 1) / STOPS)).toPrecision(3))
}

/** The nearest stop to a field; fields beyond the ends rest on the ends. */
export function stopOf(tesla: number): number {
  if (tesla <= 0) return 0
  const stop = Math.round((Math.log10(tesla) - LOW) * STOPS) + 1
  return Math.min(LAST_STOP, Math.max(1, stop))
}

/** Where a field stands along the slider, 0 to 1. */
export const placeOf = (tesla: number): number => (tesla <= 0 ? 0 : Math.min(1, Math.max(0, ((Math.log10(tesla) - LOW) * STOPS + 1) / LAST_STOP)))

export interface FieldMark {
  tesla: number
  label: string | null
}

const powerLabel = (value: number): string => (value >= 1e-3 && value <= 1e3 ? String(Number(value.toPrecision(1))) : `10${superscript(Math.round(Math.log10(value)))}`)

/** The marks under the slider: every power of ten labelled in the unit shown, 2 to 9 between them fine. */
export function fieldMarks(unit: FieldUnit): FieldMark[] {
  const marks: FieldMark[] = []
  for (let power = LOW; power <= HIGH; power += 1) {
    for (let digit = 1; digit < 10; digit += 1) {
      const tesla = digit * 10 ** power
      if (power === HIGH && digit > 1) break
      marks.push({ tesla, label: digit === 1 ? powerLabel(fieldIn(tesla, unit)) : null })
    }
  }
  return marks
}

/** One keyboard step: a unit of the second significant digit, ten times that when `coarse`. Never below zero. */
export function stepped(tesla: number, direction: 1 | -1, coarse: boolean): number {
  if (tesla === 0) return direction > 0 ? 1e-5 : 0
  // Going down from 1.0 the next value is 0.99, so the size is judged just below.
  const size = Math.floor(Math.log10(direction < 0 ? tesla * 0.999999 : tesla * 1.000001))
  const step = 10 ** (size - (coarse ? 0 : 1))
  return Math.max(0, Number((Math.round(tesla / step) * step + direction * step).toPrecision(3)))
}
