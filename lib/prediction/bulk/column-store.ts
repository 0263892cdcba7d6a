import type { PredictionOptions } from '@/lib/prediction/bulk/block'
import { BlockReader, type ColumnName } from '@/lib/prediction/bulk/columns'
import { type DiagonalisedBlock, hasStrengths, type PreparedBlock } from '@/lib/prediction/bulk/prepared'

/** Numbers that a block's columns may take while they are written: 80 MB. */
export const HELD_MOST = 10_000_000
/** n^3 of the m blocks times fields that are solved before another job may have its turn: some 10 ms. */
const WORK_AT_ONCE = 300_000
const FIELDS_AT_LEAST = 16
const FIELDS_AT_MOST = 16_384

/** Numbers by field that the solved terms take: shifts, slopes and vectors of every m block that a component needs. */
function sweepWidth({ needed, factor }: DiagonalisedBlock, { derivatives, strengths }: PredictionOptions): number {
  let width = 0
  for (const { n } of needed) if (n > 1) width += n + (derivatives ? n : 0) + (strengths && factor !== null ? n * n : 0)
  return width
}

function fieldsAtOnce({ needed }: DiagonalisedBlock): number {
  let work = 1
  for (const { n } of needed) work += n ** 3
  return Math.min(FIELDS_AT_MOST, Math.max(FIELDS_AT_LEAST, Math.floor(WORK_AT_ONCE / work)))
}

/**
 * The columns of a block over all fields, component by component, in whichever way takes least room. Of a multiplet the solved terms are held,
 * since many components share a state. A line shows one state of each m block, so that the terms would take n times what it needs: its columns are
 * finished a few fields at a time and held themselves, as many at once as there is room for, and the terms are solved again for the next ones.
 */
export class ColumnStore {
  private readonly reader: BlockReader
  /** Fields solved in one step, numbers by field that the solved terms take, and whether columns are held rather than these. */
  private readonly step: number
  private readonly width: number
  private readonly finishes: boolean
  private solved: boolean
  /** Columns held, and rooms that are used again for the next ones. */
  private held = new Map<ColumnName, Float64Array>()
  private readonly rooms: Float64Array[] = []
  private readonly together: number
  private readonly wanted: ColumnName[]

  /** `longest`: how many fields one `fill` may ask for; `most`: how many numbers may be held. */
  constructor(readonly block: PreparedBlock, options: PredictionOptions, private readonly fields: Float64Array, longest: number, most = HELD_MOST) {
    const { diagonalised, places } = block
    this.step = diagonalised === null ? 0 : fieldsAtOnce(diagonalised)
    this.solved = diagonalised === null
    this.width = diagonalised === null ? 0 : sweepWidth(diagonalised, options)
    const columnCount = 1 + Number(options.derivatives) + Number(options.strengths && hasStrengths(block)) * (options.thetaDeg === null ? 1 : 2)
    this.finishes = this.width > columnCount * places.length || this.width * fields.length > most
    this.reader = new BlockReader(block, options, fields, this.finishes ? this.step : fields.length, Math.max(longest, this.step))
    this.wanted = this.reader.columns.filter((column) => this.reader.has(column))
    this.together = Math.max(1, Math.floor(most / Math.max(1, places.length * fields.length)))
  }

  get columns(): ColumnName[] {
    return this.reader.columns
  }

  has(column: ColumnName): boolean {
    return this.reader.has(column)
  }

  /** Numbers held by now, the few fields of one step aside. */
  get numbersHeld(): number {
    return this.finishes ? this.rooms.reduce((sum, room) => sum + room.length, 0) : this.width * this.fields.length
  }

  /** Makes a column readable; in steps, so that others have their turn. Columns are to be asked for in their order, each until the next. */
  *make(column: ColumnName): Generator<null> {
    if (this.finishes) {
      if (!this.held.has(column)) yield* this.finish(this.wanted.slice(this.wanted.indexOf(column)).slice(0, this.together))
    } else if (!this.solved) {
      this.solved = true
      for (let from = 0; from < this.fields.length; from += this.step) {
        this.reader.load(from, Math.min(this.fields.length, from + this.step), 0)
        yield null
      }
    }
  }

  private *finish(columns: readonly ColumnName[]): Generator<null> {
    const { places } = this.block
    const { length } = this.fields
    this.held = new Map(columns.map((column, i) => [column, (this.rooms[i] ??= new Float64Array(places.length * length))]))
    for (let from = 0; from < length; from += this.step) {
      const to = Math.min(length, from + this.step)
      this.reader.load(from, to, from)
      for (const [column, numbers] of this.held) for (let c = 0; c < places.length; c += 1) this.reader.fill(column, c, from, to, numbers, c * length + from)
      yield null
    }
  }

  /** One column of one component at the fields `from` .. `to` into `out` from `at` on; the column has been made. */
  fill(column: ColumnName, component: number, from: number, to: number, out: Float64Array, at: number): void {
    if (!this.finishes) return this.reader.fill(column, component, from, to, out, at)
    const numbers = this.held.get(column)
    if (numbers === undefined) throw new RangeError(`${column} is not made`)
    const start = component * this.fields.length
    out.set(numbers.subarray(start + from, start + to), at)
  }
}
