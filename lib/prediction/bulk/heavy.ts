import type { PredictionJob } from '@/lib/prediction/bulk/block'
import { predictionChunks } from '@/lib/prediction/bulk/chunks'
import { type FieldTableJob, fieldTableChunks } from '@/lib/prediction/bulk/table-chunks'

/** Everything that may run in a worker. */
export type HeavyJob = PredictionJob | FieldTableJob

export const heavyChunks = (job: HeavyJob): Generator<Uint8Array | null> => (job.task === 'predictions' ? predictionChunks(job) : fieldTableChunks(job))
