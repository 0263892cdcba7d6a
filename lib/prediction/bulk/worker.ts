import os from 'node:os'
import { parentPort } from 'node:worker_threads'
import { type HeavyJob, heavyChunks } from '@/lib/prediction/bulk/heavy'
import { serveJobs } from '@/lib/prediction/bulk/worker-side'

/** Where there are more threads than processors, the one that answers small requests goes first. */
const NICENESS = 10

/** What a worker thread runs. */
if (parentPort !== null) {
  try {
    // on Linux this is of the calling thread alone; a system that does not allow it computes at the usual priority
    if (process.platform === 'linux') os.setPriority(NICENESS)
  } catch {
    // nothing depends on it
  }
  serveJobs(parentPort, (job) => heavyChunks(job as HeavyJob))
}
