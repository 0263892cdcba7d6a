import type { HeavyJob } from '@/lib/prediction/bulk/heavy'
import { heavyChunks } from '@/lib/prediction/bulk/heavy'
import type { Job, Pool } from '@/lib/prediction/bulk/pool'

/** The whole of a small job, computed here and now. */
export function wholeAnswer(job: HeavyJob): Uint8Array<ArrayBuffer> {
  const chunks: Uint8Array[] = []
  for (const chunk of heavyChunks(job)) if (chunk !== null) chunks.push(chunk)
  const whole = new Uint8Array(chunks.reduce((sum, chunk) => sum + chunk.byteLength, 0))
  let at = 0
  for (const chunk of chunks) {
    whole.set(chunk, at)
    at += chunk.byteLength
  }
  return whole
}

/**
 * A large job, computed in a worker and streamed: a chunk is asked for when the last was taken, and the work ends where the reader leaves.
 * Resolves when the first chunk is there, so that what goes wrong before is still a refusal and not a cut answer.
 */
export async function streamedAnswer(pool: Pool, caller: string, job: HeavyJob, signal: AbortSignal): Promise<ReadableStream<Uint8Array>> {
  const opened: Job = await pool.open(caller, job, signal)
  let first: Uint8Array | null = await opened.next()
  return new ReadableStream<Uint8Array>(
    {
      async pull(controller) {
        const chunk = first ?? (await opened.next())
        first = null
        if (chunk === null) controller.close()
        else controller.enqueue(chunk)
      },
      cancel() {
        opened.cancel()
      },
    },
    { highWaterMark: 1 },
  )
}
