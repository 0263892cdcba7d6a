import { quoted, readNumber } from '@/lib/units/number'
import type { Findings } from './findings'

/** A number as a source prints it: digits (perhaps in groups), and in brackets the uncertainty of the last ones. */
export interface Printed { value: number; unc: number | null; decimals: number }

const PRINTED = /^([+-]?)(\d+)(?:\.(\d*))?(?:[eE]([+-]?\d{1,3}))?(?:\((\d+(?:\.\d+)?)\))?$/

/** Reads `16973.36619`, `16 973.366 19(2)`, `1.3342(15)`; the bracket counts in units of the last digit, or as it stands where it has a point itself. Null when it is none of these. */
export function readPrinted(text: string): Printed | null {
  const plain = text.trim().replace(/[\u2212\u2013]/g, '-').replace(/(?<=\d)[ \u00a0\u2009\u202f](?=\d)/g, '').replace(/\s*\(\s*/g, '(').replace(/\s*\)$/, ')')
  const match = PRINTED.exec(plain)
  if (match === null) return null
  const [, sign = '', whole = '', fraction = '', exponent, bracket] = match
  const value = Number(`${sign}${whole}.${fraction}e${exponent ?? 0}`)
  const decimals = fraction.length - Number(exponent ?? 0)
  const unc = bracket === undefined ? null : bracket.includes('.') ? Number(`${bracket}e${exponent ?? 0}`) : Number(`${bracket}e${-decimals}`)
  return Number.isFinite(value) && (unc === null || Number.isFinite(unc)) ? { value: value === 0 ? 0 : value, unc, decimals } : null
}

/** What may stand where a number is meant. */
export type GivenNumber = number | string | null | undefined

export const isGiven = (value: unknown): boolean => value !== null && value !== undefined && !(typeof value === 'string' && value.trim() === '')

export interface NumberRule { integer?: boolean; min?: number; max?: number; above?: number; unit?: string }

function wanted({ integer = false, min, max, above, unit }: NumberRule): string {
  const range = above !== undefined ? ` above ${above}` : min !== undefined && max !== undefined ? ` from ${min} to ${max}` : min !== undefined ? ` of at least ${min}` : max !== undefined ? ` of at most ${max}` : ''
  return `${integer ? 'a whole number' : 'a number'}${range}${unit === undefined ? '' : ` (${unit})`}`
}

/** Reads a number given as such or as text. What cannot be read, or is out of range, becomes an error of the field, and null. */
export function readGivenNumber(findings: Findings, field: string, given: GivenNumber, rule: NumberRule = {}): number | null {
  if (!isGiven(given)) return null
  const value = typeof given === 'string' ? readNumber(given) : (given ?? null)
  if (value === null || !Number.isFinite(value) || (rule.integer === true && !Number.isSafeInteger(value))) {
    const comma = typeof given === 'string' && /^\s*[+-]?\d+,\d+\s*$/.test(given) ? ' Write the decimal point as a point.' : ''
    findings.error('number_malformed', field, `${quoted(String(given))} is not ${wanted(rule)}.${comma}`)
    return null
  }
  const outside = (rule.min !== undefined && value < rule.min) || (rule.max !== undefined && value > rule.max) || (rule.above !== undefined && value <= rule.above)
  if (outside) {
    findings.error('number_out_of_range', field, `${value} is out of range: give ${wanted(rule)}.`)
    return null
  }
  return value === 0 ? 0 : value
}

/** An uncertainty: one standard deviation, never negative; unknown is null. */
export function readUncertainty(findings: Findings, field: string, given: GivenNumber): number | null {
  const value = readGivenNumber(findings, field, given)
  if (value === null || value >= 0) return value
  findings.error('uncertainty_negative', field, `An uncertainty is never negative; give the standard deviation, or leave it out where it is not known.`)
  return null
}

/** Text without the blanks around it; nothing is null. */
export const readText = (given: string | null | undefined): string | null => {
  const text = given?.trim() ?? ''
  return text === '' ? null : text
}

/** One of a few words. */
export function readChoice<T extends string>(findings: Findings, field: string, given: string | null | undefined, words: readonly T[], code: string, missing: string | null): T | null {
  const text = readText(given)
  if (text === null) {
    if (missing !== null) findings.error(code, field, missing)
    return null
  }
  const found = words.find((word) => word === text)
  if (found === undefined) findings.error('value_not_listed', field, `${quoted(text)} is none of ${words.join(', ')}.`)
  return found ?? null
}

/** How many decimals a number shows as it is printed shortest. */
export function decimalsOf(value: number): number {
  const match = /^-?\d+(?:\.(\d+))?(?:e([+-]\d+))?$/.exec(String(value))
  return match === null ? 0 : (match[1]?.length ?? 0) - Number(match[2] ?? 0)
}
