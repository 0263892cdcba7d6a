import { Field, FixedSizeList, Float64, Schema } from 'apache-arrow'
import { createHash } from 'node:crypto'
import { type FieldTable, fieldTableSteps, TABLE_PROOF } from '@/lib/atomic/field-table'
import { batchMessage, endMark, type NodePlan, padded, schemaMessage } from '@/lib/prediction/bulk/arrow-message'
import type { MultipletGiven } from '@/lib/prediction/bulk/block'
import { type ModelledBlock, modelledBlock } from '@/lib/prediction/bulk/prepared'

export interface FieldTableJob {
  task: 'field-table'
  format: 'json' | 'arrow'
  multiplet: MultipletGiven
  fromTesla: number
  toTesla: number
  model: 'linear' | 'intermediate'
  gS: number | null
  maxErrorInvcm: number
  maxStrengthError: number
  /** `meta` of the answer as JSON text. */
  meta: string
}

/** What the checksum is of, told in `meta.conventions`. */
export const TABLE_CHECKSUM =
  'SHA-256 over little-endian float64 numbers: q, m_lower, m_upper (by component), nodes_tesla, positions_invcm, position_slopes_invcm_per_tesla, strengths, strength_slopes_per_tesla, each [node][component] row after row; strengths are left out where they are null.'

const LINEAR_PROOF = 'In the linear law every position is a straight line of the field and every strength constant, so two nodes give them exactly, but for rounding'

/** Rounding of positions, their interpolation included, by the largest of them: 16 units of its last place. */
export const positionRounding = (largest: number): number => 16 * Number.EPSILON * largest

/** The table in the linear law. */
function linearTable(block: ModelledBlock, fromTesla: number, toTesla: number): FieldTable {
  const nodes = [fromTesla, toTesla]
  const linear = block.linear ?? { slopes: new Float64Array(0), strengths: null }
  const both = (value: (c: number, tesla: number) => number) => Float64Array.from(nodes.flatMap((tesla) => block.places.map((_, c) => value(c, tesla) + 0)))
  const positions = both((c, tesla) => (block.centres[c] ?? 0) + (linear.slopes[c] ?? 0) * tesla)
  const { strengths } = linear
  return {
    nodesTesla: Float64Array.from(nodes),
    components: block.places.length,
    positions,
    positionSlopes: both((c) => linear.slopes[c] ?? 0),
    strengths: strengths === null ? null : both((c) => strengths[c] ?? 0),
    strengthSlopes: strengths === null ? null : both(() => 0),
    maximumErrorInvcm: positionRounding(positions.reduce((largest, value) => Math.max(largest, Math.abs(value)), 0)),
    maximumStrengthError: strengths === null ? null : 1e-15,
    proved: true,
  }
}

/** JSON writes a negative zero as 0: without any, every format and the checksum are of the same bits. */
function withoutNegativeZeros(table: FieldTable): FieldTable {
  for (const numbers of [table.positions, table.positionSlopes, table.strengths, table.strengthSlopes]) {
    for (let i = 0; i < (numbers?.length ?? 0); i += 1) if (numbers?.[i] === 0) numbers[i] = 0
  }
  return table
}

function* makeTable(job: FieldTableJob, block: ModelledBlock): Generator<null, FieldTable> {
  const { fromTesla, toTesla, maxErrorInvcm, maxStrengthError } = job
  if (block.diagonalised === null) return linearTable(block, fromTesla, toTesla)
  const largest = block.centres.reduce((most, centre) => Math.max(most, Math.abs(centre)), 0)
  // twice the rounding is kept free, since the field moves positions beyond the largest without it; never more than half of what is asked
  return yield* fieldTableSteps(block.diagonalised.multiplet, { fromTesla, toTesla, toleranceInvcm: Math.max(maxErrorInvcm - 2 * positionRounding(largest), maxErrorInvcm / 2), toleranceStrength: maxStrengthError })
}

const bytesOf = (numbers: Float64Array): Uint8Array => new Uint8Array(numbers.buffer, numbers.byteOffset, numbers.byteLength)

function checksumOf(block: ModelledBlock, table: FieldTable): string {
  const hash = createHash('sha256')
  const names = [block.places.map((place) => place.q), block.places.map((place) => place.twoMLower / 2), block.places.map((place) => place.twoMUpper / 2)]
  for (const name of names) hash.update(bytesOf(Float64Array.from(name, (value) => value + 0)))
  for (const numbers of [table.nodesTesla, table.positions, table.positionSlopes, table.strengths, table.strengthSlopes]) if (numbers !== null) hash.update(bytesOf(numbers))
  return hash.digest('hex')
}

/** What is said of a table beside its rows. */
const headOf = (job: FieldTableJob, block: ModelledBlock) => ({
  transition: job.multiplet.transition,
  model: job.model,
  j_lower: block.jLower,
  j_upper: block.jUpper,
  m_lower: block.places.map((place) => place.twoMLower / 2),
  m_upper: block.places.map((place) => place.twoMUpper / 2),
  q: block.places.map((place) => place.q),
})

const tailOf = (job: FieldTableJob, block: ModelledBlock, table: FieldTable) => ({
  strength_normalisation: 'multiplet',
  max_error_invcm: table.maximumErrorInvcm,
  max_strength_error: table.maximumStrengthError,
  proved: table.proved,
  proof: job.model === 'linear' ? LINEAR_PROOF : TABLE_PROOF,
  checksum_sha256: checksumOf(block, table),
})

const ROWS_OF = [['positions_invcm', 'positions'], ['position_slopes_invcm_per_tesla', 'positionSlopes'], ['strengths', 'strengths'], ['strength_slopes_per_tesla', 'strengthSlopes']] as const

/** Rows of a matrix as JSON, in pieces of about so many numbers. */
const PIECE = 8192

function* matrixText(numbers: Float64Array, width: number): Generator<string> {
  const each = Math.max(1, Math.floor(PIECE / Math.max(1, width)))
  const rows = width === 0 ? 0 : numbers.length / width
  yield '['
  for (let from = 0; from < rows; from += each) {
    const pieces = Array.from({ length: Math.min(rows, from + each) - from }, (_, i) => JSON.stringify([...numbers.subarray((from + i) * width, (from + i + 1) * width)]))
    yield `${from === 0 ? '' : ','}${pieces.join(',')}`
  }
  yield ']'
}

function* jsonText(job: FieldTableJob, block: ModelledBlock, table: FieldTable): Generator<string> {
  yield `{"data":${JSON.stringify({ ...headOf(job, block), nodes_tesla: [...table.nodesTesla] }).slice(0, -1)}`
  for (const [name, from] of ROWS_OF) {
    const numbers = table[from]
    yield `,"${name}":`
    if (numbers === null) yield 'null'
    else yield* matrixText(numbers, table.components)
  }
  yield `,${JSON.stringify(tailOf(job, block, table)).slice(1)},"meta":${job.meta}}`
}

/** One record batch with one row a node; lists are over the components, whose names stand in the schema's metadata. */
function* arrowBytes(job: FieldTableJob, block: ModelledBlock, table: FieldTable): Generator<Uint8Array> {
  const units = { positions: 'cm^-1', positionSlopes: 'cm^-1/T', strengths: null, strengthSlopes: '1/T' } as const
  const columns = ROWS_OF.flatMap(([name, from]) => {
    const numbers = table[from]
    return numbers === null ? [] : [{ name, numbers, unit: units[from] }]
  })
  const list = (name: string, unit: string | null) =>
    new Field(name, new FixedSizeList(table.components, new Field('item', new Float64(), false)), false, unit === null ? new Map<string, string>() : new Map([['unit', unit]]))
  const facts = { ...headOf(job, block), ...tailOf(job, block, table) }
  const metadata = new Map<string, string>([['table', 'field_table'], ...Object.entries(facts).map(([name, value]): [string, string] => [name, typeof value === 'string' ? value : JSON.stringify(value)]), ['meta', job.meta]])
  yield schemaMessage(new Schema([new Field('nodes_tesla', new Float64(), false, new Map([['unit', 'T']])), ...columns.map((column) => list(column.name, column.unit))], metadata))
  const rows = table.nodesTesla.length
  const plans: NodePlan[] = [
    { length: rows, nulls: 0, buffers: [0, table.nodesTesla.byteLength] },
    ...columns.flatMap(({ numbers }): NodePlan[] => [{ length: rows, nulls: 0, buffers: [0] }, { length: numbers.length, nulls: 0, buffers: [0, numbers.byteLength] }]),
  ]
  yield batchMessage(rows, plans, new Map())
  for (const numbers of [table.nodesTesla, ...columns.map((column) => column.numbers)]) {
    const bytes = bytesOf(numbers)
    for (let from = 0; from < bytes.byteLength; from += 8 * 65_536) yield bytes.slice(from, from + 8 * 65_536)
    if (padded(bytes.byteLength) > bytes.byteLength) yield new Uint8Array(padded(bytes.byteLength) - bytes.byteLength)
  }
  yield endMark()
}

const encoder = new TextEncoder()

/** The answer of a field table in bytes; `null` while it is being made. */
export function* fieldTableChunks(job: FieldTableJob): Generator<Uint8Array | null> {
  const block = modelledBlock(job.multiplet, job.model, { gS: job.gS, thetaDeg: null })
  yield null
  const table = withoutNegativeZeros(yield* makeTable(job, block))
  if (job.format === 'arrow') yield* arrowBytes(job, block, table)
  else for (const text of jsonText(job, block, table)) yield encoder.encode(text)
}
