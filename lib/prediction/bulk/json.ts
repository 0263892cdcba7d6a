import type { PredictionOptions } from '@/lib/prediction/bulk/block'
import { BlockReader, type ColumnName } from '@/lib/prediction/bulk/columns'
import type { PreparedBlock } from '@/lib/prediction/bulk/prepared'

/** Numbers that are worked on at once: few enough to stay in the processor's cache. */
const AT_ONCE = 16_384

/** The rows of one column, [field][component], a piece of text for each few fields. */
function* rowsText(reader: BlockReader, column: ColumnName, fields: number, each: number): Generator<string> {
  const { places } = reader.block
  const numbers = new Float64Array(places.length * each)
  // plain numbers, which JSON writes shortest and exactly; NaN, a hole, it writes as null
  const row = new Array<number>(places.length).fill(0)
  yield '['
  for (let from = 0; from < fields; from += each) {
    const to = Math.min(fields, from + each)
    reader.load(from, to, from)
    for (let c = 0; c < places.length; c += 1) reader.fill(column, c, from, to, numbers, c * each)
    let text = ''
    for (let f = 0; f < to - from; f += 1) {
      for (let c = 0; c < places.length; c += 1) row[c] = numbers[c * each + f] as number
      text += `${from + f === 0 ? '' : ','}${JSON.stringify(row)}`
    }
    yield text
  }
  yield ']'
}

/** Strengths and what is made of them: one row in the linear law, a row for each field in the intermediate model. */
function* strengthsText(reader: BlockReader, column: 'strength' | 'intensity', fields: number, each: number): Generator<string> {
  if (!reader.columns.includes(column) || !reader.has(column)) yield 'null'
  else if (reader.block.linear !== null) {
    const one = new Float64Array(1)
    yield JSON.stringify(
      reader.block.places.map((_, c) => {
        reader.fill(column, c, 0, 1, one, 0)
        return one[0]
      }),
    )
  } else yield* rowsText(reader, column, fields, each)
}

/** One block as JSON, piece by piece. Each column is computed by itself, so that no more than a few fields stand in memory. */
export function* blockText(block: PreparedBlock, fields: Float64Array, options: PredictionOptions): Generator<string> {
  const { places } = block
  const each = Math.max(1, Math.min(fields.length, Math.floor(AT_ONCE / Math.max(1, places.length))))
  const reader = new BlockReader(block, options, fields, each, each)
  const names = {
    transition: block.transition,
    model: block.model,
    j_lower: block.jLower,
    j_upper: block.jUpper,
    m_lower: places.map((place) => place.twoMLower / 2),
    m_upper: places.map((place) => place.twoMUpper / 2),
    q: places.map((place) => place.q),
  }
  yield `${JSON.stringify(names).slice(0, -1)},"values":`
  yield* rowsText(reader, 'value', fields.length, each)
  yield ',"derivatives":'
  if (options.derivatives) yield* rowsText(reader, 'derivative', fields.length, each)
  else yield 'null'
  yield ',"strengths":'
  yield* strengthsText(reader, 'strength', fields.length, each)
  yield ',"intensities":'
  yield* strengthsText(reader, 'intensity', fields.length, each)
  yield `,"strength_normalisation":${JSON.stringify(block.normalisation)},"validity":${JSON.stringify(block.validity)}}`
}
