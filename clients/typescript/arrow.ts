import { type Data, type Float64, type FixedSizeList, type RecordBatch, RecordBatchReader } from 'apache-arrow'
import type { Meta, PredictionBlock, PredictionValidity } from './api'
import type { Body, Lodeterm, Sending } from './client'
import { BrokenAnswerError } from './problem'

/** Numbers of the components of one block: one array over the fields for each component, NaN where there is no value. */
export type Columns = readonly Float64Array[]

/** A line's or a multiplet's components over a grid of fields, as POST /predictions names them, in typed arrays. */
export interface ArrayBlock {
  transition: string | null
  model: 'linear' | 'intermediate'
  /** The grid as the request gave it: `{ values, unit }` or `{ start, stop, count, unit }`. */
  field: Body<'predict'>['field']
  /** m_upper - m_lower. */
  q: Int32Array
  mLower: Float64Array
  mUpper: Float64Array
  /** J by continuity from zero field; NaN where zero-field energies coincide. */
  jLower: Float64Array
  jUpper: Float64Array
  /** In `unit`, the unit of the quantity asked. */
  values: Columns
  unit: string
  /** In `unit` per tesla; null where not asked. */
  derivatives: Columns | null
  /** Null where not asked, or where the line has no amplitude. */
  strengths: Columns | null
  intensities: Columns | null
  /** line: each q sums to 1 at zero field. multiplet: everything sums to 1. */
  strengthNormalisation: 'line' | 'multiplet'
  validity: PredictionValidity
  meta: Meta
}

/** Numbers of an Arrow column without a copy where none is missing; NaN where one is. */
function plain(data: Data): Float64Array {
  const numbers = (data.values as Float64Array).subarray(0, data.length)
  if (data.nullCount === 0) return numbers
  const copy = Float64Array.from(numbers)
  for (let i = 0; i < data.length; i += 1) if (!data.getValid(i)) copy[i] = Number.NaN
  return copy
}

function listColumn(batch: RecordBatch, name: string): Columns | null {
  const index = batch.schema.fields.findIndex((field) => field.name === name)
  const data = batch.data.children[index]
  if (data === undefined || (data.nullCount > 0 && data.nullCount === data.length)) return null
  const { listSize } = data.type as FixedSizeList<Float64>
  const numbers = plain(data.children[0] as Data)
  return Array.from({ length: data.length }, (_, row) => numbers.subarray(row * listSize, (row + 1) * listSize))
}

function blockOf(batch: RecordBatch): ArrayBlock {
  const { schema, metadata } = batch
  const child = (name: string): Data => {
    const data = batch.data.children[schema.fields.findIndex((field) => field.name === name)]
    if (data === undefined) throw new BrokenAnswerError(`The stream has no column ${name}.`)
    return data
  }
  const told = (name: string): string => {
    const text = metadata.get(name)
    if (text === undefined) throw new BrokenAnswerError(`A batch does not tell its ${name}.`)
    return text
  }
  return {
    transition: metadata.get('transition') ?? null,
    model: told('model') as ArrayBlock['model'],
    field: JSON.parse(told('field')) as ArrayBlock['field'],
    q: (child('q').values as Int32Array).subarray(0, batch.numRows),
    mLower: plain(child('m_lower')),
    mUpper: plain(child('m_upper')),
    jLower: plain(child('j_lower')),
    jUpper: plain(child('j_upper')),
    values: listColumn(batch, 'value') ?? [],
    unit: schema.fields.find((field) => field.name === 'value')?.metadata.get('unit') ?? '',
    derivatives: listColumn(batch, 'derivative'),
    strengths: listColumn(batch, 'strength'),
    intensities: listColumn(batch, 'intensity'),
    strengthNormalisation: told('strength_normalisation') as ArrayBlock['strengthNormalisation'],
    validity: JSON.parse(told('validity')) as PredictionValidity,
    meta: JSON.parse(schema.metadata.get('meta') ?? '{}') as Meta,
  }
}

/** Predictions as Arrow, block by block as they come: numbers are never text on their way. Throws BrokenAnswerError where the stream was cut. */
export async function* predictArrays(table: Lodeterm, body: Body<'predict'>, sending: Sending = {}): AsyncGenerator<ArrayBlock> {
  const response = await table.ask('predict', {}, body, { ...sending, format: 'arrow' })
  const wanted = (body.lines?.length ?? 0) + (body.multiplets?.length ?? 0)
  let came = 0
  const reader = await RecordBatchReader.from(response)
  for await (const batch of reader) {
    came += 1
    yield blockOf(batch)
  }
  if (came !== wanted) throw new BrokenAnswerError(`The stream ended after ${came} of ${wanted} blocks.`)
}

/** Predictions as NDJSON, block by block. Throws BrokenAnswerError where the last line, which says that it is complete, did not come. */
export async function* predictBlocks(table: Lodeterm, body: Body<'predict'>, sending: Sending = {}): AsyncGenerator<PredictionBlock> {
  const response = await table.ask('predict', {}, body, { ...sending, format: 'ndjson' })
  let rest = ''
  const reader = (response.body ?? new ReadableStream()).pipeThrough(new TextDecoderStream()).getReader()
  for (let piece = await reader.read(); !piece.done; piece = await reader.read()) {
    const lines = (rest + piece.value).split('\n')
    rest = lines.pop() ?? ''
    for (const line of lines) {
      const row = JSON.parse(line) as PredictionBlock | { complete: true }
      if ('complete' in row) return
      yield row
    }
  }
  throw new BrokenAnswerError('The stream ended before the line that says it is complete.')
}
