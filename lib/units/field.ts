import { quoted, splitQuantity } from '@/lib/units/number'

export type FieldUnit = 'T' | 'mT' | 'µT' | 'G' | 'kG'

/** Magnetic flux density units; `perTesla` of them make one tesla (a divisor, so that 150 mT is exactly the double 0.15). */
export const FIELD_UNITS: Record<FieldUnit, { name: string; perTesla: number; spellings: readonly string[] }> = {
  T: { name: 'tesla', perTesla: 1, spellings: ['T', 'tesla', 'Tesla', 'teslas'] },
  mT: { name: 'millitesla', perTesla: 1e3, spellings: ['mT', 'millitesla'] },
  µT: { name: 'microtesla', perTesla: 1e6, spellings: ['µT', 'μT', 'uT', 'microtesla'] },
  G: { name: 'gauss', perTesla: 1e4, spellings: ['G', 'gauss', 'Gauss', 'Gs'] },
  kG: { name: 'kilogauss', perTesla: 10, spellings: ['kG', 'kilogauss', 'kGs'] },
}

export const FIELD_MAX_TESLA = 10_000

export const FIELD_UNIT_NAMES = Object.keys(FIELD_UNITS) as FieldUnit[]

export type ParsedField = { ok: true; tesla: number; unit: FieldUnit } | { ok: false; code: string; detail: string }

const refuse = (code: string, detail: string): ParsedField => ({ ok: false, code, detail })

const KNOWN = 'T, mT, µT (or uT), G, kG'

/** The unit a spelling means, case-sensitive as SI wants it (mT is not MT); null when unknown. */
export function readFieldUnit(text: string): FieldUnit | null {
  for (const unit of FIELD_UNIT_NAMES) if (FIELD_UNITS[unit].spellings.includes(text)) return unit
  return null
}

/** The field in tesla of a value in a unit; throws nothing, checks nothing. */
export const fieldFrom = (value: number, unit: FieldUnit): number => value / FIELD_UNITS[unit].perTesla

/** The number a field of `tesla` has in a unit. */
export const fieldIn = (tesla: number, unit: FieldUnit): number => tesla * FIELD_UNITS[unit].perTesla

/** Checks the range 0 to 10 000 T that the physics here is meant for. */
export function checkFieldTesla(tesla: number): { code: string; detail: string } | null {
  if (!Number.isFinite(tesla)) return { code: 'field_not_finite', detail: `A field must be a finite number; give one from 0 to ${FIELD_MAX_TESLA} T.` }
  if (tesla < 0) return { code: 'field_negative', detail: 'A field is a magnitude and cannot be negative; give one from 0 up, and turn the viewing angle instead.' }
  if (tesla > FIELD_MAX_TESLA) return { code: 'field_too_large', detail: `${tesla} T is beyond the ${FIELD_MAX_TESLA} T that is computed here; give a smaller field.` }
  return null
}

/**
 * Reads a magnetic field as typed: `1.5T`, `15 kG`, `150mT`, `150000G`, `300 uT`; a bare number is tesla.
 * Errors: `field_malformed`, `field_unit_unknown`, `field_negative`, `field_too_large`, `field_not_finite`.
 */
export function parseField(text: string): ParsedField {
  const split = splitQuantity(text)
  if (!split) return refuse('field_malformed', `${quoted(text)} is not a field: write a number and a unit, such as 1.5T or 15kG (units: ${KNOWN}; a bare number is tesla).`)
  if (/^[,_]\d/.test(split.unitText)) return refuse('field_malformed', `${quoted(text)} is not a field: write one number with a decimal point and no separators, such as 1.5T.`)
  const unit = split.unitText === '' ? 'T' : readFieldUnit(split.unitText)
  if (!unit) {
    const nearest = FIELD_UNIT_NAMES.find((known) => FIELD_UNITS[known].spellings.some((s) => s.toLowerCase() === split.unitText.toLowerCase()))
    const hint = nearest ? ` Did you mean ${nearest}? Capitals matter in units.` : ''
    return refuse('field_unit_unknown', `${quoted(split.unitText)} is not a known unit of field; known units: ${KNOWN}.${hint}`)
  }
  const tesla = split.finite ? fieldFrom(split.value, unit) : Number.POSITIVE_INFINITY
  const wrong = checkFieldTesla(tesla)
  return wrong ? refuse(wrong.code, wrong.detail) : { ok: true, tesla: tesla === 0 ? 0 : tesla, unit }
}

/** A field for reading, in the unit asked: up to twelve significant digits, no trailing zeros (`1.5 T`, `15 kG`). */
export const formatField = (tesla: number, unit: FieldUnit): string => `${Number(fieldIn(tesla, unit).toPrecision(12))} ${unit}`

/** The same without a space, as it stands in a link or a request: `1.5T`, `15kG` (µ written u so that it needs no escaping). */
export const fieldForUrl = (tesla: number, unit: FieldUnit): string => `${Number(fieldIn(tesla, unit).toPrecision(15))}${unit === 'µT' ? 'uT' : unit}`
