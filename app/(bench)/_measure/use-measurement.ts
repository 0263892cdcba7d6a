'use client'
import { parseAsArrayOf, parseAsBoolean, parseAsFloat, parseAsString, parseAsStringLiteral, throttle, useQueryStates } from 'nuqs'
import { useCallback, useMemo } from 'react'
import { useEdition } from '@/app/_components/data/edition'
import { isTransition, type Measured, MEDIA, MODELS, MOST_LINES, QUANTITIES, readRows, type Row, SCALES, UNITS, writeRows } from './state'

const FIELD_UNITS = ['T', 'mT', 'G', 'kG'] as const
export type ShownFieldUnit = (typeof FIELD_UNITS)[number]

/** Browsers limit how often the address may change. */
const URL_EVERY_MS = 400

const PARSERS = {
  lines: parseAsArrayOf(parseAsString).withDefault([]),
  p: parseAsString.withDefault(''),
  quantity: parseAsStringLiteral(QUANTITIES).withDefault('positions'),
  unit: parseAsStringLiteral(UNITS).withDefault('nm'),
  medium: parseAsStringLiteral(MEDIA).withDefault('conventional'),
  shared: parseAsBoolean.withDefault(false),
  scale: parseAsStringLiteral(SCALES).withDefault('exact'),
  scale_unc: parseAsString.withDefault(''),
  model: parseAsStringLiteral(MODELS).withDefault('auto'),
  theta: parseAsFloat,
  range: parseAsString.withDefault(''),
  step: parseAsString.withDefault(''),
  step_unc: parseAsString.withDefault(''),
  unknown: parseAsStringLiteral(['field', 'g'] as const).withDefault('field'),
  field: parseAsString.withDefault(''),
  field_unc: parseAsString.withDefault(''),
  free: parseAsStringLiteral(['lower', 'upper', 'both'] as const).withDefault('upper'),
  show: parseAsStringLiteral(FIELD_UNITS).withDefault('T'),
  invented: parseAsBoolean.withDefault(false),
}

export type Address = ReturnType<typeof useMeasurement>['address']
export type Change = ReturnType<typeof useMeasurement>['change']

/** The whole page in its address: what was measured, how it is read, and in which unit the field is shown. */
export function useMeasurement() {
  const [address, setAddress] = useQueryStates(PARSERS, { history: 'replace', limitUrlUpdates: throttle(URL_EVERY_MS) })
  const { param: edition } = useEdition()
  const lines = useMemo(() => address.lines.filter(isTransition).slice(0, MOST_LINES), [address.lines])
  const rows = useMemo(() => readRows(address.p), [address.p])
  const measured = useMemo(
    (): Measured => ({
      lines, rows, edition,
      quantity: address.quantity, unit: address.unit, medium: address.medium, shared: address.shared, scale: address.scale, scaleUnc: address.scale_unc, model: address.model, thetaDeg: address.theta,
      range: address.range, step: address.step, stepUnc: address.step_unc, unknown: address.unknown, field: address.field, fieldUnc: address.field_unc, freeG: address.free,
    }),
    [lines, rows, edition, address],
  )
  /** Whatever is changed, the data are then no longer those of the example. */
  const change = useCallback((next: Partial<typeof address>) => void setAddress({ ...next, invented: null }), [setAddress])
  const setRows = useCallback((next: readonly Row[]) => change({ p: writeRows(next) }), [change])
  const show = useCallback((unit: ShownFieldUnit) => void setAddress({ show: unit }), [setAddress])
  const fill = useCallback((next: Partial<typeof address>) => void setAddress(next), [setAddress])
  return { address, measured, change, setRows, show, fill }
}
