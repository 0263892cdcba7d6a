import type { z } from 'zod'
import type { Snapshot } from '@/lib/catalogue/shape'
import type { Fault } from '@/lib/problem'
import { readField } from '@/lib/prediction/bulk/field'
import { BlockMaker } from '@/lib/prediction/bulk/levels'
import { faultsAt, modelFaults } from '@/lib/prediction/bulk/request'
import type { FieldTableJob } from '@/lib/prediction/bulk/table-chunks'
import { fieldFrom } from '@/lib/units/field'
import type { makeFieldTable } from '@/openapi/operations/field-tables'

type Asked = z.output<NonNullable<(typeof makeFieldTable)['body']>>

/** Reads a request for a field table against an edition, or tells everything that is wrong with it. */
export function planFieldTable(snapshot: Snapshot, body: Asked): { plan: Omit<FieldTableJob, 'format' | 'meta'> | null; faults: Fault[] } {
  const { faults } = readField(body.field)
  if (!(body.field.stop > body.field.start)) faults.push({ pointer: '/field/stop', code: 'field_interval', detail: `A field table runs from a field to a larger one; this is from ${body.field.start} to ${body.field.stop}.` })
  const at = 'transition' in body.multiplet ? '/multiplet/transition' : '/multiplet'
  try {
    const multiplet = new BlockMaker(snapshot, { gValues: body.g_values, gS: body.g_s ?? null }).multiplet(body.multiplet, '/multiplet')
    if (body.model === 'intermediate') faults.push(...modelFaults(multiplet, at))
    if (faults.length > 0) return { plan: null, faults }
    const { field, model, max_error_invcm, max_strength_error } = body
    const tesla = (value: number) => fieldFrom(value, field.unit)
    return { plan: { task: 'field-table', multiplet, fromTesla: tesla(field.start), toTesla: tesla(field.stop), model, gS: body.g_s ?? null, maxErrorInvcm: max_error_invcm, maxStrengthError: max_strength_error }, faults }
  } catch (error) {
    return { plan: null, faults: [...faults, ...faultsAt(error, at)] }
  }
}
