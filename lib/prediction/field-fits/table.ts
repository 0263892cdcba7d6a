import { type Field, integer, number, tableOf, text } from '@/lib/prediction/tables/column'
import type { Table } from '@/openapi/core/table'
import type { FitResidual } from '@/openapi/schemas/field-fits'

const INVCM = 'cm-1'

const only = (row: FitResidual) => (row.components.length === 1 ? row.components[0] : undefined)
const qOf = (row: FitResidual): number | null => {
  const qs = new Set(row.components.map((component) => component.q))
  return qs.size === 1 ? ([...qs][0] ?? null) : null
}

const RESIDUAL_FIELDS: readonly Field<FitResidual>[] = [
  integer('measurement', 'Its place in the request, from 0', (r) => r.measurement),
  integer('line', 'Index of its line, from 0', (r) => r.line),
  text('transition', 'Transition of the table', (r) => r.transition),
  number('position', null, 'As given, in the unit of the request', (r) => r.position),
  number('position_unc', null, 'One standard deviation, as given', (r) => r.position_unc),
  number('position_invcm', INVCM, 'Vacuum wavenumber, or distance from the reference of its line', (r) => r.position_invcm),
  number('position_unc_invcm', INVCM, 'One standard deviation', (r) => r.position_unc_invcm),
  number('fitted_invcm', INVCM, 'Fitted position', (r) => r.fitted_invcm),
  number('residual_invcm', INVCM, 'Measured minus fitted', (r) => r.residual_invcm),
  number('standardised', null, 'Residual over its own deviation', (r) => r.standardised),
  number('leverage', null, 'Share of the point in its own fitted value', (r) => r.leverage),
  number('m_lower', null, 'm of the lower level; empty where several components make the peak', (r) => only(r)?.m_lower),
  number('m_upper', null, 'm of the upper level; empty where several components make the peak', (r) => only(r)?.m_upper),
  integer('q', 'm_upper - m_lower; empty where several q make the peak', qOf),
  integer('component_count', 'Components that the peak was read as', (r) => r.components.length),
  text('assigned', 'by_hand or automatic', (r) => r.assigned),
  number('field_without_tesla', 'T', 'Field fitted without this point', (r) => r.field_without_tesla),
  number('influence', null, 'Change of the field by this point, in standard deviations', (r) => r.influence),
]

/** Residuals, one row per measurement. */
export const residualTable = (residuals: Iterable<FitResidual>): Table => tableOf('field-fit', RESIDUAL_FIELDS, residuals)
