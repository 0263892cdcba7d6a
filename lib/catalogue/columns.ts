import type { EditionContent, HyperfineRow, LevelRow, MeasuredGRow, RetiredLevel, SnapshotColumns } from '@/lib/catalogue/shape'
import type { Coupling, Evidence } from '@/openapi/schemas/common'

const COUPLINGS: readonly Coupling[] = ['LS', 'J1K', 'jj', 'unassigned']
const EVIDENCES: readonly Evidence[] = ['read', 'quoted', 'recalled', 'computed']

export const couplingAt = (code: number): Coupling => COUPLINGS[code] ?? 'unassigned'
export const evidenceAt = (code: number): Evidence => EVIDENCES[code] ?? 'recalled'

/** Each different text once; a level keeps its number. */
export class Texts {
  private readonly numbers = new Map<string, number>()
  private readonly texts: string[] = []

  number(text: string): number {
    const known = this.numbers.get(text)
    if (known !== undefined) return known
    this.numbers.set(text, this.texts.length)
    return this.texts.push(text) - 1
  }

  find(text: string): number {
    return this.numbers.get(text) ?? -1
  }

  text(number: number): string {
    return this.texts[number] ?? ''
  }

  get bytes(): number {
    return this.texts.reduce((sum, text) => sum + 2 * text.length + 80, 0)
  }
}

/** A snapshot's levels as columns, and what few levels have as sparse maps. -1 (or NaN) stands for null in number columns. */
export interface PackedLevels {
  readonly columns: SnapshotColumns
  readonly size: number
  readonly total: number
  readonly speciesRanges: readonly (readonly [number, number])[]
  readonly texts: Texts
  readonly configuration: Uint32Array
  readonly label: Int32Array
  readonly energySource: Uint32Array
  readonly energyEvidence: Uint8Array
  readonly energyUncInvcm: Float64Array
  readonly coupling: Uint8Array
  readonly twoK: Int8Array
  readonly coreTwoS: Int8Array
  readonly coreL: Int8Array
  readonly coreTwoJ: Int8Array
  readonly lOuter: Int8Array
  readonly twoJOuter: Int8Array
  readonly lineChecked: Uint8Array
  readonly repeatIndex: Int16Array
  readonly revision: Uint32Array
  readonly energyLiteral: ReadonlyMap<number, string>
  readonly alternativeName: ReadonlyMap<number, string>
  readonly note: ReadonlyMap<number, string>
  readonly chosenG: ReadonlyMap<number, { value: number; reason: string }>
  readonly measured: ReadonlyMap<number, readonly MeasuredGRow[]>
  readonly hyperfine: ReadonlyMap<number, readonly HyperfineRow[]>
  readonly retired: ReadonlyMap<number, RetiredLevel>
  readonly bytes: number
}

/** Active before retired, then by species, energy and ordinal. */
function inOrder(content: EditionContent, speciesIndex: ReadonlyMap<string, number>): LevelRow[] {
  const group = (row: LevelRow): number => (row.status === 'active' ? 0 : 1)
  const species = (row: LevelRow): number => speciesIndex.get(row.speciesId) ?? 0
  return [...content.levels].sort((a, b) => group(a) - group(b) || species(a) - species(b) || a.energyInvcm - b.energyInvcm || a.ordinal - b.ordinal)
}

function rangesOf(columns: SnapshotColumns, size: number, speciesCount: number): [number, number][] {
  const ranges: [number, number][] = []
  let from = 0
  for (let species = 0; species < speciesCount; species += 1) {
    let to = from
    while (to < size && columns.speciesOf[to] === species) to += 1
    ranges.push([from, to])
    from = to
  }
  return ranges
}

function groupByLevel<Row extends { levelId: string }>(rows: readonly Row[], indexOfAny: (id: string) => number | undefined): Map<number, Row[]> {
  const grouped = new Map<number, Row[]>()
  for (const row of rows) {
    const index = indexOfAny(row.levelId)
    if (index === undefined) continue
    const list = grouped.get(index)
    if (list) list.push(row)
    else grouped.set(index, [row])
  }
  return grouped
}

/** Packs an edition's levels. `gAdopted` is left NaN for the caller to fill. */
export function packLevels(
  content: EditionContent,
  speciesIndex: ReadonlyMap<string, number>,
): { packed: PackedLevels; indexById: ReadonlyMap<string, number> } {
  const rows = inOrder(content, speciesIndex)
  const total = rows.length
  const texts = new Texts()
  const small = () => new Int8Array(total).fill(-1)
  const columns = {
    speciesOf: new Uint16Array(total),
    energyInvcm: new Float64Array(total),
    twoJ: new Int16Array(total),
    twoS: new Int16Array(total).fill(-1),
    l: new Int16Array(total).fill(-1),
    parity: new Uint8Array(total),
    lsNamed: new Uint8Array(total),
    gAdopted: new Float64Array(total).fill(Number.NaN),
    ordinal: new Uint32Array(total),
  }
  const own = {
    configuration: new Uint32Array(total),
    label: new Int32Array(total).fill(-1),
    energySource: new Uint32Array(total),
    energyEvidence: new Uint8Array(total),
    energyUncInvcm: new Float64Array(total).fill(Number.NaN),
    coupling: new Uint8Array(total),
    twoK: small(),
    coreTwoS: small(),
    coreL: small(),
    coreTwoJ: small(),
    lOuter: small(),
    twoJOuter: small(),
    lineChecked: new Uint8Array(total),
    repeatIndex: new Int16Array(total).fill(-1),
    revision: new Uint32Array(total),
  }
  const energyLiteral = new Map<number, string>()
  const alternativeName = new Map<number, string>()
  const note = new Map<number, string>()
  const chosenG = new Map<number, { value: number; reason: string }>()
  const retired = new Map<number, RetiredLevel>()
  const indexById = new Map<string, number>()
  let size = 0
  rows.forEach((row, i) => {
    indexById.set(`${row.speciesId}.${row.ordinal}`, i)
    columns.speciesOf[i] = speciesIndex.get(row.speciesId) ?? 0
    columns.energyInvcm[i] = row.energyInvcm
    columns.twoJ[i] = row.twoJ
    // S and L count for rules and filters only where the level is named by them
    if (row.coupling === 'LS') {
      columns.lsNamed[i] = 1
      columns.twoS[i] = row.twoS ?? -1
      columns.l[i] = row.l ?? -1
    }
    columns.parity[i] = row.parity === 'odd' ? 1 : 0
    columns.ordinal[i] = row.ordinal
    own.configuration[i] = texts.number(row.configuration)
    if (row.label !== null) own.label[i] = texts.number(row.label)
    own.energySource[i] = texts.number(row.energySource)
    own.energyEvidence[i] = EVIDENCES.indexOf(row.energyEvidence)
    if (row.energyUncInvcm !== null) own.energyUncInvcm[i] = row.energyUncInvcm
    own.coupling[i] = COUPLINGS.indexOf(row.coupling)
    own.twoK[i] = row.twoK ?? -1
    own.coreTwoS[i] = row.coreTwoS ?? -1
    own.coreL[i] = row.coreL ?? -1
    own.coreTwoJ[i] = row.coreTwoJ ?? -1
    own.lOuter[i] = row.lOuter ?? -1
    own.twoJOuter[i] = row.twoJOuter ?? -1
    own.lineChecked[i] = row.lineChecked ? 1 : 0
    own.repeatIndex[i] = row.repeatIndex ?? -1
    own.revision[i] = row.revision
    if (row.energyLiteral !== null) energyLiteral.set(i, row.energyLiteral)
    if (row.alternativeName !== null) alternativeName.set(i, row.alternativeName)
    if (row.note !== null) note.set(i, row.note)
    if (row.gChosen !== null) chosenG.set(i, { value: row.gChosen, reason: row.gChosenReason ?? '' })
    if (row.status === 'active') size += 1
    else retired.set(i, { reason: row.retiredReason, successor: row.successor, edition: row.publishedFrom })
  })
  const arrays = [...Object.values(columns), ...Object.values(own)]
  const sparse = [energyLiteral, alternativeName, note].reduce((sum, map) => sum + [...map.values()].reduce((s, text) => s + 2 * text.length + 64, 0), 0)
  const packed: PackedLevels = {
    columns,
    size,
    total,
    speciesRanges: rangesOf(columns, size, content.species.length),
    texts,
    ...own,
    energyLiteral,
    alternativeName,
    note,
    chosenG,
    measured: groupByLevel(content.measuredG, (id) => indexById.get(id)),
    hyperfine: groupByLevel(content.hyperfine, (id) => indexById.get(id)),
    retired,
    // 120 bytes a level for the map of ids, 200 a row of measured g or hyperfine constants
    bytes: arrays.reduce((sum, array) => sum + array.byteLength, 0) + texts.bytes + sparse + 120 * total + 200 * (content.measuredG.length + content.hyperfine.length),
  }
  return { packed, indexById }
}
