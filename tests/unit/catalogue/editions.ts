import { printConfiguration } from '@/lib/atomic/configuration'
import { toRoman } from '@/lib/atomic/elements'
import { parseHalf } from '@/lib/atomic/half'
import { buildSnapshot, type EditionContent, type Snapshot } from '@/lib/catalogue/snapshot'
import { coreOf, levelRow } from '@/seeds/level-row'
import { readSeed } from '@/seeds/read'

const half = (text: string): number => {
  const two = parseHalf(text)
  if (!two.ok) throw new Error(two.detail)
  return two.value / 2
}

/** The first edition as the database would hand it over, made from the data files without a database. */
export function seedContent(): EditionContent {
  const seed = readSeed()
  return {
    edition: 1,
    species: seed.species.map((one) => {
      const core = coreOf(one)
      return {
        id: one.id,
        element: one.id.slice(0, one.id.indexOf('-')),
        z: one.z,
        stage: toRoman(one.charge + 1),
        charge: one.charge,
        name: one.name,
        core_configuration: core === null ? '' : printConfiguration(core),
        ionisation_energy_invcm: one.ionisation_energy_invcm,
        ionisation_source: one.source,
        ionisation_evidence: one.evidence,
        note: null,
        isotopes: one.isotopes.map((isotope) => ({
          mass_number: isotope.mass_number,
          mass_u: isotope.mass_u,
          nuclear_spin: half(isotope.spin),
          abundance_percent: isotope.abundance_percent,
          g_i: isotope.g_i ?? null,
          source: one.isotope_source,
          evidence: one.isotope_evidence,
        })),
      }
    }),
    levels: seed.species.flatMap((one) => {
      const core = coreOf(one)
      return one.levels.map((level, at) => {
        const { row } = levelRow(one, core, level)
        return {
          speciesId: one.id,
          ordinal: at + 1,
          configuration: row.configuration,
          coupling: row.coupling,
          label: row.label ?? null,
          twoS: row.twoS ?? null,
          l: row.l ?? null,
          twoJ: row.twoJ,
          twoK: row.twoK ?? null,
          coreTwoS: row.coreTwoS ?? null,
          coreL: row.coreL ?? null,
          coreTwoJ: row.coreTwoJ ?? null,
          lOuter: row.lOuter ?? null,
          twoJOuter: null,
          parity: row.parity,
          repeatIndex: null,
          alternativeName: row.alternativeName ?? null,
          energyInvcm: row.energyInvcm,
          energyUncInvcm: null,
          energyLiteral: null,
          energySource: one.source,
          energyEvidence: row.energyEvidence,
          lineChecked: row.lineChecked ?? false,
          note: row.note ?? null,
          status: 'active' as const,
          retiredReason: null,
          successor: null,
          publishedFrom: 1,
          revision: 1,
          gChosen: null,
          gChosenReason: null,
        }
      })
    }),
    measuredG: seed.measuredG.map(({ level, ...row }) => ({ levelId: level, ...row })),
    hyperfine: seed.hyperfine.map(({ level, ...row }) => ({ levelId: level, ...row })),
    sources: seed.sources,
  }
}

let made: Snapshot | undefined
export const seedSnapshot = (): Snapshot => (made ??= buildSnapshot(seedContent()))

/** The first edition with some levels retired, as a later edition would hold them. */
export function withRetired(levelIds: readonly string[], edition = 2): Snapshot {
  const content = seedContent()
  return buildSnapshot({
    ...content,
    edition,
    levels: content.levels.map((row) =>
      levelIds.includes(`${row.speciesId}.${row.ordinal}`) ? { ...row, status: 'retired' as const, retiredReason: 'entered twice', successor: 'Na-I.2', publishedFrom: edition, revision: 2 } : row,
    ),
  })
}
