import { electronCount, openShells } from '@/lib/atomic/configuration'
import type { SpeciesRow } from '../rows'
import { atomOf, coreOf, readConfiguration } from '../values'
import type { UnionLevel, Work } from './work'

/** A species: its core within the ion's electrons and closed. */
export function checkSpecies(work: Work): void {
  const row = work.row as SpeciesRow | null
  const core = row === null ? null : coreOf(row.coreConfiguration)
  if (row === null || core === null) return
  const [has, most] = [electronCount(core), row.z - row.charge]
  if (has > most) work.findings.error('electron_count', 'core_configuration', `The core ${row.coreConfiguration} has ${has} electrons, and the ion only ${most}: mend the core.`)
  const [open] = openShells(core)
  if (open !== undefined) work.findings.error('core_not_closed', 'core_configuration', `The core ${row.coreConfiguration} has an open shell; a core is what all levels leave out, in closed shells.`)
}

const names = (levels: readonly UnionLevel[]): string => `${levels.slice(0, 3).map((level) => level.id).join(', ')}${levels.length > 3 ? ` and ${levels.length - 3} more` : ''}`

/** What a changed species does to the levels that the table has of it. */
export function checkSpeciesAgainstLevels(work: Work, levels: readonly UnionLevel[]): void {
  const row = work.row as SpeciesRow | null
  const before = work.published?.row as SpeciesRow | undefined
  if (row === null) return
  if (before !== undefined && before.coreConfiguration !== row.coreConfiguration) {
    const atom = atomOf(work.change.subject, row)
    const broken = levels.filter((level) => {
      if (level.work !== null) return false
      const read = readConfiguration(level.row.configuration, atom)
      return !read.ok || read.value.electrons !== null || read.value.canonical !== level.row.configuration
    })
    if (broken.length > 0) work.findings.error('core_breaks_levels', 'core_configuration', `With this core the electrons of ${names(broken)} no longer come to ${row.z - row.charge}: replace those levels too, or keep the core.`)
  }
  const limit = row.ionisationEnergyInvcm
  if (limit !== null && limit !== before?.ionisationEnergyInvcm) {
    const above = levels.filter((level) => level.row.energyInvcm > limit)
    if (above.length > 0) work.findings.warning('energy_above_ionisation', 'ionisation_energy_invcm', `${names(above)} would lie above this ionisation energy.`)
  }
}
