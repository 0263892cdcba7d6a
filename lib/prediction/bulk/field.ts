import type { Fault } from '@/lib/problem'
import type { FieldGiven } from '@/lib/prediction/bulk/block'
import { FIELD_MAX_TESLA, FIELD_UNITS, fieldFrom, type FieldUnit } from '@/lib/units/field'

type Asked = { values: number[]; unit: FieldUnit } | { start: number; stop: number; count?: number; unit: FieldUnit }

/** The fields of a body, and every one that is beyond what is computed here, at its place. */
export function readField(asked: Asked): { field: FieldGiven; faults: Fault[] } {
  const { perTesla, name } = FIELD_UNITS[asked.unit]
  const faults: Fault[] = []
  const check = (value: number, pointer: string): void => {
    if (fieldFrom(value, asked.unit) > FIELD_MAX_TESLA) faults.push({ pointer, code: 'field_too_large', detail: `${value} ${name} is beyond the ${FIELD_MAX_TESLA} T that is computed here; give a smaller field.` })
  }
  if ('values' in asked) {
    asked.values.forEach((value, i) => check(value, `/field/values/${i}`))
    return { field: { values: asked.values, perTesla }, faults }
  }
  check(asked.start, '/field/start')
  check(asked.stop, '/field/stop')
  return { field: { start: asked.start, stop: asked.stop, count: asked.count ?? 2, perTesla }, faults }
}
