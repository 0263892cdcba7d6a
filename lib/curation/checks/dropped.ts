import type { LevelRow } from '../rows'
import type { Findings } from '../values'

/** A replacement is the whole row: what it leaves out is gone, which is easily meant otherwise. */
export function checkDropped(findings: Findings, before: LevelRow, after: LevelRow): void {
  const gone: string[] = []
  if (before.measured.length > after.measured.length) gone.push(before.measured.length - after.measured.length === 1 ? 'a measured g_J' : `${before.measured.length - after.measured.length} measured g_J`)
  if (before.energyUncInvcm !== null && after.energyUncInvcm === null) gone.push('the uncertainty of the energy')
  if (before.energyLiteral !== null && after.energyLiteral === null) gone.push('the printed digits')
  if (before.gChosen !== null && after.gChosen === null) gone.push('the chosen g_J')
  if (before.label !== null && after.label === null) gone.push('the label')
  if (before.alternativeName !== null && after.alternativeName === null) gone.push('the alternative name')
  if (before.note !== null && after.note === null) gone.push('the note')
  if (before.lineChecked && !after.lineChecked) gone.push('the mark line_checked')
  if (gone.length > 0) findings.warning('values_dropped', null, `The level had ${gone.length === 1 ? gone[0] : `${gone.slice(0, -1).join(', ')} and ${gone.at(-1)}`}, and this replaces the whole row without: give again what is to stay.`)
}
