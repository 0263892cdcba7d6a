import { coupledRange } from '@/lib/atomic/half'
import { toRoman } from '@/lib/atomic/elements'
import type { JudgedLevel } from '@/lib/atomic/rules'
import { couplingAt, packLevels, type PackedLevels } from '@/lib/catalogue/columns'
import { adoptedNumber } from '@/lib/catalogue/g-value'
import { buildLevel } from '@/lib/catalogue/level-view'
import { countSources, sourcesBySpecies } from '@/lib/catalogue/provenance'
import type { EditionContent, RetiredLevel, Snapshot, SpeciesRow, TermMembers } from '@/lib/catalogue/shape'
import type { HyperfineConstants, Level } from '@/openapi/schemas/level'
import type { Species } from '@/openapi/schemas/species'

const LEVELS_KEPT = 4096

/** Sums to a few more digits than any abundance is printed with, so that 0.1 + 0.2 reads 0.3. */
const tidySum = (values: readonly number[]): number => Number(values.reduce((sum, value) => sum + value, 0).toPrecision(12))

function speciesOf(row: SpeciesRow, levelCount: number, sources: readonly string[]): Species {
  const abundances = row.isotopes.flatMap((isotope) => (isotope.abundance_percent === null ? [] : [isotope.abundance_percent]))
  return {
    id: row.id,
    element: row.element,
    z: row.z,
    stage: toRoman(row.charge + 1),
    charge: row.charge,
    name: row.name,
    core_configuration: row.core_configuration,
    ionisation_energy_invcm: row.ionisation_energy_invcm,
    ionisation_source: row.ionisation_source,
    ionisation_evidence: row.ionisation_evidence,
    level_count: levelCount,
    isotopes: [...row.isotopes],
    isotope_abundance_sum_percent: abundances.length === 0 ? null : tidySum(abundances),
    sources: [...sources],
    note: row.note,
  }
}

/** The active levels of the term that level i belongs to. A scan of one species: a few microseconds for a thousand levels. */
function membersOf(packed: PackedLevels, i: number): TermMembers {
  const { columns } = packed
  const isLs = columns.lsNamed[i] === 1
  if (!isLs || i >= packed.size) return { indices: [i], missingTwoJ: [], complete: false }
  const [from, to] = packed.speciesRanges[columns.speciesOf[i] ?? 0] ?? [0, 0]
  const twoS = columns.twoS[i] ?? 0
  const l = columns.l[i] ?? 0
  const indices: number[] = []
  for (let k = from; k < to; k += 1) {
    if (columns.lsNamed[k] !== 1 || columns.twoS[k] !== twoS || columns.l[k] !== l || columns.parity[k] !== columns.parity[i]) continue
    if (packed.configuration[k] !== packed.configuration[i] || packed.label[k] !== packed.label[i] || packed.repeatIndex[k] !== packed.repeatIndex[i]) continue
    indices.push(k)
  }
  indices.sort((a, b) => (columns.twoJ[a] ?? 0) - (columns.twoJ[b] ?? 0))
  const present = new Set(indices.map((k) => columns.twoJ[k]))
  const missingTwoJ = coupledRange(twoS, 2 * l).filter((twoJ) => !present.has(twoJ))
  return { indices, missingTwoJ, complete: missingTwoJ.length === 0 }
}

/** Keeps the levels built last, so that a page of results or a line asked again costs nothing. */
function levelKeeper(build: (index: number) => Level): (index: number) => Level {
  const kept = new Map<number, Level>()
  return (index) => {
    const found = kept.get(index)
    if (found) {
      kept.delete(index)
      kept.set(index, found)
      return found
    }
    const made = build(index)
    kept.set(index, made)
    if (kept.size > LEVELS_KEPT) for (const oldest of kept.keys()) {
      kept.delete(oldest)
      break
    }
    return made
  }
}

/** Makes the snapshot of an edition from what the database holds of it. Pure: the same content gives the same snapshot. */
export function buildSnapshot(content: EditionContent): Snapshot {
  const speciesIndex = new Map(content.species.map((row, index) => [row.id, index]))
  const { packed, indexById } = packLevels(content, speciesIndex)
  const { columns, size, total, speciesRanges } = packed
  for (let i = 0; i < total; i += 1) columns.gAdopted[i] = adoptedNumber(packed, i)

  const sources = countSources(content)
  const restOf = sourcesBySpecies(content)
  const species = content.species.map((row, index) => {
    const [from, to] = speciesRanges[index] ?? [0, 0]
    return speciesOf(row, to - from, restOf.get(row.id) ?? [])
  })
  const speciesId = (i: number): string => species[columns.speciesOf[i] ?? 0]?.id ?? ''
  const levelId = (i: number): string => `${speciesId(i)}.${columns.ordinal[i] ?? 0}`
  const level = levelKeeper((i) => {
    if (!Number.isInteger(i) || i < 0 || i >= total) throw new RangeError(`level index ${i} is outside 0 .. ${total - 1}`)
    return buildLevel(packed, i, levelId(i), speciesId(i))
  })
  const hyperfine = (i: number): HyperfineConstants[] =>
    (packed.hyperfine.get(i) ?? []).map(({ mass_number, a_mhz, a_unc_mhz, b_mhz, b_unc_mhz, source, evidence, note }) => ({ mass_number, a_mhz, a_unc_mhz, b_mhz, b_unc_mhz, source, evidence, note }))
  const retired = (id: string): RetiredLevel | undefined => {
    const i = indexById.get(id)
    return i === undefined ? undefined : packed.retired.get(i)
  }
  const judged = (i: number): JudgedLevel => ({
    twoJ: columns.twoJ[i] ?? 0,
    twoS: columns.lsNamed[i] === 1 ? (columns.twoS[i] ?? 0) : null,
    l: columns.lsNamed[i] === 1 ? (columns.l[i] ?? 0) : null,
    parity: columns.parity[i] === 1 ? 'odd' : 'even',
    coupling: couplingAt(packed.coupling[i] ?? 3),
  })
  return {
    edition: content.edition,
    species,
    speciesIndex,
    size,
    total,
    columns,
    sources,
    sourceByKey: new Map(sources.map((source) => [source.key, source])),
    // 3 kB for each of the levels that may be kept built
    bytes: packed.bytes + 3000 * Math.min(LEVELS_KEPT, total),
    speciesRange: (index) => speciesRanges[index] ?? [0, 0],
    indexOf: (id) => {
      const i = indexById.get(id)
      return i === undefined || i >= size ? undefined : i
    },
    levelId,
    retired,
    level,
    detail: (i) => ({ ...level(i), hyperfine_constants: hyperfine(i) }),
    hyperfine,
    judged,
    termMembers: (i) => membersOf(packed, i),
    configurationOf: (i) => packed.texts.text(packed.configuration[i] ?? 0),
    labelOf: (i) => ((packed.label[i] ?? -1) < 0 ? null : packed.texts.text(packed.label[i] ?? 0)),
    couplingOf: (i) => couplingAt(packed.coupling[i] ?? 3),
    alternativeNameOf: (i) => packed.alternativeName.get(i) ?? null,
    noteOf: (i) => packed.note.get(i) ?? null,
    energySourceOf: (i) => packed.texts.text(packed.energySource[i] ?? 0),
    twoKOf: (i) => packed.twoK[i] ?? -1,
    restsOn: (i, key) =>
      packed.texts.text(packed.energySource[i] ?? 0) === key ||
      (packed.measured.get(i)?.some((row) => row.source === key) ?? false) ||
      (packed.hyperfine.get(i)?.some((row) => row.source === key) ?? false),
  }
}
