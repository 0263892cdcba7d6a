'use client'
import { parseAsString, throttle, useQueryState } from 'nuqs'
import { useCallback, useMemo } from 'react'
import { fieldForUrl, formatField, parseField } from '@/lib/units/field'
import type { FieldValue } from './field-scale'

/** The address follows a drag, but not at every pixel: browsers limit how often it may change. */
const URL_EVERY_MS = 150
const options = { history: 'replace', limitUrlUpdates: throttle(URL_EVERY_MS) } as const

export interface FieldState {
  field: FieldValue
  setField: (field: FieldValue) => void
  /** What is wrong with the field in the address, if anything; the default is in force then. */
  problem: string | null
}

/** The field of this view, kept in the address as `?field=1.5T`. */
export function useField(byDefault: FieldValue = { tesla: 1, unit: 'T' }): FieldState {
  const [text, setText] = useQueryState('field', parseAsString.withOptions(options))
  const parsed = useMemo(() => (text === null ? null : parseField(text)), [text])
  const { tesla, unit } = parsed?.ok ? parsed : byDefault
  const field = useMemo(() => ({ tesla, unit }), [tesla, unit])
  const setField = useCallback((next: FieldValue) => void setText(fieldForUrl(next.tesla, next.unit)), [setText])
  return { field, setField, problem: parsed && !parsed.ok ? `${parsed.detail} Until then ${formatField(byDefault.tesla, byDefault.unit)} is shown.` : null }
}

export interface AngleState {
  /** Null: averaged over angle. */
  thetaDeg: number | null
  setThetaDeg: (thetaDeg: number | null) => void
  problem: string | null
}

/** An angle in degrees from 0 to 180, or what is wrong with it. */
export function readAngle(text: string): { ok: true; degrees: number } | { ok: false; detail: string } {
  const degrees = Number(text.trim().replace(/\s*(?:°|deg)$/, '').replace(',', '.'))
  if (text.trim() === '' || !Number.isFinite(degrees)) return { ok: false, detail: `“${text.slice(0, 40)}” is not an angle: write degrees from 0 to 180, such as 45.` }
  if (degrees < 0 || degrees > 180) return { ok: false, detail: 'The angle between the field and the line of sight runs from 0° to 180°.' }
  return { ok: true, degrees: degrees === 0 ? 0 : degrees }
}

/** The viewing angle of this view, kept in the address as `?theta=90`; absent where it is averaged over. */
export function useAngle(): AngleState {
  const [text, setText] = useQueryState('theta', parseAsString.withOptions(options))
  const parsed = text === null ? null : readAngle(text)
  const setThetaDeg = useCallback((thetaDeg: number | null) => void setText(thetaDeg === null ? null : String(thetaDeg)), [setText])
  return { thetaDeg: parsed?.ok ? parsed.degrees : null, setThetaDeg, problem: parsed && !parsed.ok ? `${parsed.detail} Until then it is averaged over angle.` : null }
}
