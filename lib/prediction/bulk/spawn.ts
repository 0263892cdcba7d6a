import { Worker } from 'node:worker_threads'
import type { WorkerLike } from '@/lib/prediction/bulk/pool'

/** Most memory for objects that one worker may take before it, and not the server, ends. Buffers of numbers are not among it. */
const HEAP_MB = 512

/** Starts a worker thread. The build finds the file by this very form and bundles it; nothing else of it may be computed. */
export const spawnWorker = (): WorkerLike => new Worker(new URL('./worker.ts', import.meta.url), { resourceLimits: { maxOldGenerationSizeMb: HEAP_MB } }) as unknown as WorkerLike
