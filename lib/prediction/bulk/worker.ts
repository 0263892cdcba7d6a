import { parentPort } from 'node:worker_threads'
import { type HeavyJob, heavyChunks } from '@/lib/prediction/bulk/heavy'
import { serveJobs } from '@/lib/prediction/bulk/worker-side'

/** What a worker thread runs. */
if (parentPort !== null) serveJobs(parentPort, (job) => heavyChunks(job as HeavyJob))
