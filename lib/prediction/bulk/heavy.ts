import type { PredictionJob } from '@/lib/prediction/bulk/block'
import { predictionChunks } from '@/lib/prediction/bulk/chunks'
import { type FieldFitJob, fieldFitChunks } from '@/lib/prediction/field-fits/job'
import { type FieldTableJob, fieldTableChunks } from '@/lib/prediction/bulk/table-chunks'

/** Everything that may run in a worker. */
export type HeavyJob = PredictionJob | FieldTableJob | FieldFitJob

export function heavyChunks(job: HeavyJob): Generator<Uint8Array | null> {
  if (job.task === 'field-fit') return fieldFitChunks(job)
  return job.task === 'predictions' ? predictionChunks(job) : fieldTableChunks(job)
}
