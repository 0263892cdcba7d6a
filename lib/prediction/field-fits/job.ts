import { deserialize, serialize } from 'node:v8'
import { type FieldFit, type FieldFitInput, fitField } from '@/lib/atomic/field-fit'
import type { Pool } from '@/lib/prediction/bulk/pool'

/** A fit that is made in a worker. */
export interface FieldFitJob {
  task: 'field-fit'
  input: FieldFitInput
}

/** What a worker does of a fit: all of it in one slice, its result in one chunk. Numbers go over as they are, which JSON would not carry. */
export function* fieldFitChunks({ input }: FieldFitJob): Generator<Uint8Array | null> {
  yield serialize(fitField(input))
}

/** A fit made in a worker, so that who asks for little meanwhile is answered. Refuses as the pool does: 429 and 503. */
export async function fitInPool(pool: Pool, caller: string, input: FieldFitInput, signal: AbortSignal): Promise<FieldFit> {
  const job = await pool.open(caller, { task: 'field-fit', input } satisfies FieldFitJob, signal)
  const bytes = await job.next()
  // a job that is cancelled ends with nothing; nobody reads what is answered then
  if (bytes === null) throw new Error('the fit was left by its caller')
  await job.next()
  return deserialize(bytes) as FieldFit
}
