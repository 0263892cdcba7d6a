import { endMark } from '@/lib/prediction/bulk/arrow-message'
import { blockBatch, predictionHead } from '@/lib/prediction/bulk/arrow'
import { fieldsTesla, largestField, type PredictionJob } from '@/lib/prediction/bulk/block'
import { blockText } from '@/lib/prediction/bulk/json'
import { prepareSteps } from '@/lib/prediction/bulk/prepared'

/** Small pieces are joined up to this before they travel. */
const CHUNK_BYTES = 131_072

const encoder = new TextEncoder()

function* textPieces(job: PredictionJob): Generator<string | null> {
  const [fields, largest] = [fieldsTesla(job.field), largestField(job.field)]
  if (job.format === 'json') yield '{"data":['
  for (const [i, given] of job.blocks.entries()) {
    // a block that is remembered takes no steps to decide, and may yet be large
    yield null
    const block = yield* prepareSteps(given, largest, job.options)
    if (job.format === 'json' && i > 0) yield ','
    yield* blockText(block, fields, job.options)
    if (job.format === 'ndjson') yield '\n'
  }
  yield job.format === 'json' ? `],"meta":${job.meta}}` : `{"meta":${job.meta},"complete":true}\n`
}

function* arrowPieces(job: PredictionJob): Generator<Uint8Array | null> {
  const [fields, largest] = [fieldsTesla(job.field), largestField(job.field)]
  yield predictionHead(job)
  for (const [i, given] of job.blocks.entries()) {
    // a block that is remembered takes no steps to decide, and may yet be large
    yield null
    yield* blockBatch(yield* prepareSteps(given, largest, job.options), i, fields, job)
  }
  yield endMark()
}

function* textChunks(job: PredictionJob): Generator<Uint8Array | null> {
  let text = ''
  for (const piece of textPieces(job)) {
    if (piece === null) {
      yield null
      continue
    }
    text += piece
    if (text.length < CHUNK_BYTES) continue
    yield encoder.encode(text)
    text = ''
  }
  if (text !== '') yield encoder.encode(text)
}

function joined(pieces: readonly Uint8Array[], length: number): Uint8Array {
  const [first] = pieces
  if (pieces.length === 1 && first !== undefined) return first
  const whole = new Uint8Array(length)
  let at = 0
  for (const piece of pieces) {
    whole.set(piece, at)
    at += piece.byteLength
  }
  return whole
}

function* byteChunks(job: PredictionJob): Generator<Uint8Array | null> {
  let [pieces, length]: [Uint8Array[], number] = [[], 0]
  for (const piece of arrowPieces(job)) {
    if (piece === null) {
      yield null
      continue
    }
    if (length > 0 && length + piece.byteLength > CHUNK_BYTES) {
      yield joined(pieces, length)
      ;[pieces, length] = [[], 0]
    }
    pieces.push(piece)
    length += piece.byteLength
  }
  if (length > 0) yield joined(pieces, length)
}

/** The answer of a job in bytes, chunk by chunk, made as it is asked for; `null` where some work was done and nothing is ready yet. */
export const predictionChunks = (job: PredictionJob): Generator<Uint8Array | null> => (job.format === 'arrow' ? byteChunks(job) : textChunks(job))
