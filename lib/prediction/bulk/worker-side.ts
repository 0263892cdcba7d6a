import { PhysicsError } from '@/lib/atomic/errors'
import type { FromWorker, ToWorker } from '@/lib/prediction/bulk/pool'

/** The worker's end of the line to the pool. */
export interface Line {
  postMessage(message: FromWorker, transfer?: ArrayBuffer[]): void
  on(event: 'message', listener: (message: ToWorker) => void): unknown
}

/** A slice that has nothing ready ends after so long, so that other jobs have their turn. */
const SLICE_MS = 10

/** Serves slices of jobs: one generator a job, asked for its next chunk whenever the pool wants one. */
export function serveJobs(line: Line, chunksOf: (job: unknown) => Generator<Uint8Array | null>): void {
  const jobs = new Map<number, Generator<Uint8Array | null>>()

  const slice = (id: number): void => {
    const chunks = jobs.get(id)
    // dropped while the slice was on its way
    if (chunks === undefined) return line.postMessage({ type: 'done', id })
    const until = performance.now() + SLICE_MS
    do {
      const step = chunks.next()
      if (step.done === true) {
        jobs.delete(id)
        return line.postMessage({ type: 'done', id })
      }
      if (step.value !== null) return sendChunk(line, id, step.value)
    } while (performance.now() < until)
    line.postMessage({ type: 'pause', id })
  }

  line.on('message', (message) => {
    if (message.type === 'open') jobs.set(message.id, chunksOf(message.job))
    else if (message.type === 'drop') {
      jobs.get(message.id)?.return(undefined)
      jobs.delete(message.id)
    } else {
      try {
        slice(message.id)
      } catch (error) {
        jobs.delete(message.id)
        const refusal = error instanceof PhysicsError ? { code: error.code, detail: error.detail } : null
        line.postMessage({ type: 'failed', id: message.id, reason: error instanceof Error ? (error.stack ?? error.message) : String(error), refusal })
      }
    }
  })
}

/** The chunk's memory goes over as it is where it is the whole of a buffer, else a copy of its part does. */
function sendChunk(line: Line, id: number, chunk: Uint8Array): void {
  const bytes = chunk.byteLength === chunk.buffer.byteLength ? (chunk as Uint8Array<ArrayBuffer>) : chunk.slice()
  line.postMessage({ type: 'chunk', id, bytes }, [bytes.buffer])
}
