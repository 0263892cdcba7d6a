import { buildSnapshot, type EditionContent, type Snapshot } from '@/lib/catalogue/snapshot'
import type { LevelRow } from '@/lib/catalogue/shape'

const SODIUM: EditionContent['species'][number] = {
  id: 'Na-I', element: 'Na', z: 11, stage: 'I', charge: 0, name: 'sodium', core_configuration: '[Ne]',
  ionisation_energy_invcm: null, ionisation_source: null, ionisation_evidence: null, note: null, isotopes: [],
}

const LEVEL: LevelRow = {
  speciesId: 'Na-I', ordinal: 1, configuration: '3s', coupling: 'LS', label: null, twoS: 1, l: 0, twoJ: 1, twoK: null, coreTwoS: null, coreL: null, coreTwoJ: null, lOuter: null, twoJOuter: null,
  parity: 'even', repeatIndex: null, alternativeName: null, energyInvcm: 0, energyUncInvcm: null, energyLiteral: null, energySource: 'made', energyEvidence: 'computed', lineChecked: false, note: null,
  status: 'active', retiredReason: null, successor: null, publishedFrom: 1, revision: 1, gChosen: null, gChosenReason: null,
}

export const level = (changes: Partial<LevelRow>): LevelRow => ({ ...LEVEL, ...changes })

/** The first levels of sodium: 3s 2S1/2, 3p 2P*1/2 and 2P*3/2. */
export const SODIUM_LEVELS: readonly LevelRow[] = [
  level({}),
  level({ ordinal: 2, configuration: '3p', l: 1, twoJ: 1, parity: 'odd', energyInvcm: 16956.17025 }),
  level({ ordinal: 3, configuration: '3p', l: 1, twoJ: 3, parity: 'odd', energyInvcm: 16973.36619 }),
]

/** A small edition in memory. */
export const edition = (levels: readonly LevelRow[], more: Partial<EditionContent> = {}): Snapshot =>
  buildSnapshot({ edition: 1, species: [SODIUM], levels, measuredG: [], hyperfine: [], sources: [{ key: 'made', citation: 'Made for a test', kind: 'other', authors: null, title: null, journal: null, year: null, doi: null, note: null }], ...more })
