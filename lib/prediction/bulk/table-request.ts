import type { z } from 'zod'
import type { Snapshot } from '@/lib/catalogue/shape'
import type { Fault } from '@/lib/problem'
import type { MultipletGiven } from '@/lib/prediction/bulk/block'
import { readField } from '@/lib/prediction/bulk/field'
import { BlockMaker } from '@/lib/prediction/bulk/levels'
import { faultsAt, modelFaults } from '@/lib/prediction/bulk/request'
import { type FieldTableJob, positionRounding } from '@/lib/prediction/bulk/table-chunks'
import { givenMultipletFault } from '@/lib/prediction/term-work'
import { fieldFrom } from '@/lib/units/field'
import type { makeFieldTable } from '@/openapi/operations/field-tables'

type Asked = z.output<NonNullable<(typeof makeFieldTable)['body']>>

/** The largest wavenumber between the levels of a multiplet, without field. */
const largestCentre = ({ lower, upper }: MultipletGiven): number =>
  lower.levels.reduce((most, low) => upper.levels.reduce((all, high) => Math.max(all, Math.abs(high.energyInvcm - low.energyInvcm)), most), 0)

/** Reads a request for a field table against an edition, or tells everything that is wrong with it. */
export function planFieldTable(snapshot: Snapshot, body: Asked): { plan: Omit<FieldTableJob, 'format' | 'meta'> | null; faults: Fault[] } {
  const { faults } = readField(body.field)
  if (!(body.field.stop > body.field.start)) faults.push({ pointer: '/field/stop', code: 'field_interval', detail: `A field table runs from a field to a larger one; this is from ${body.field.start} to ${body.field.stop}.` })
  const at = 'transition' in body.multiplet ? '/multiplet/transition' : '/multiplet'
  try {
    const multiplet = new BlockMaker(snapshot, { gValues: body.g_values, gS: body.g_s ?? null }).multiplet(body.multiplet, '/multiplet')
    if (body.model === 'intermediate') faults.push(...modelFaults(multiplet, at))
    const oversized = givenMultipletFault(multiplet, 'table_too_large', at)
    if (oversized !== null) faults.push(oversized)
    const rounding = positionRounding(largestCentre(multiplet))
    if (2 * rounding > body.max_error_invcm) {
      faults.push({ pointer: '/max_error_invcm', code: 'error_below_rounding', detail: `Positions of this multiplet are rounded by up to ${rounding.toPrecision(2)} cm^-1, so an error of ${body.max_error_invcm} cm^-1 cannot be kept; ask for ${(2 * rounding).toPrecision(2)} cm^-1 or more.` })
    }
    if (faults.length > 0) return { plan: null, faults }
    const { field, model, max_error_invcm, max_strength_error } = body
    const tesla = (value: number) => fieldFrom(value, field.unit)
    return { plan: { task: 'field-table', multiplet, fromTesla: tesla(field.start), toTesla: tesla(field.stop), model, gS: body.g_s ?? null, maxErrorInvcm: max_error_invcm, maxStrengthError: max_strength_error }, faults }
  } catch (error) {
    return { plan: null, faults: [...faults, ...faultsAt(error, at)] }
  }
}
