import { desc, eq } from 'drizzle-orm'
import { getDb, listen, type Listener } from '@/db/client'
import { editions } from '@/db/schema'
import { buildSnapshot } from '@/lib/catalogue/build'
import { loadEdition } from '@/lib/catalogue/load'
import type { Snapshot } from '@/lib/catalogue/shape'

/** Memory that snapshots may hold together; the edition asked for last always stays. */
export const SNAPSHOT_MEMORY_BYTES = 400 * 1024 * 1024

interface Kept {
  readonly loading: Promise<Snapshot>
  bytes: number
}

/** Editions by number, least recently asked first. Two requests for one edition share one load; a failed load is forgotten. */
export class SnapshotCache {
  private readonly kept = new Map<number, Kept>()

  constructor(
    private readonly load: (edition: number) => Promise<Snapshot>,
    private readonly limitBytes: number = SNAPSHOT_MEMORY_BYTES,
  ) {}

  get(edition: number): Promise<Snapshot> {
    const found = this.kept.get(edition)
    if (found) {
      this.kept.delete(edition)
      this.kept.set(edition, found)
      return found.loading
    }
    const entry: Kept = { loading: this.load(edition), bytes: 0 }
    this.kept.set(edition, entry)
    entry.loading.then(
      (snapshot) => {
        entry.bytes = snapshot.bytes
        this.trim()
      },
      () => {
        if (this.kept.get(edition) === entry) this.kept.delete(edition)
      },
    )
    return entry.loading
  }

  editions(): number[] {
    return [...this.kept.keys()]
  }

  private trim(): void {
    let held = [...this.kept.values()].reduce((sum, entry) => sum + entry.bytes, 0)
    for (const [edition, entry] of [...this.kept].slice(0, -1)) {
      if (held <= this.limitBytes) return
      held -= entry.bytes
      this.kept.delete(edition)
    }
  }
}

/** Whatever is process-wide: on globalThis, since a server's bundles may each hold a copy of this module. */
interface Held {
  readonly snapshots: SnapshotCache
  readonly published: Set<number>
  listener: Listener | undefined
  /** The newest edition, trusted only while the listener is connected; `generation` tells a late answer from a fresh one. */
  latest: number | undefined
  connected: boolean
  generation: number
}

const holder: { [key: symbol]: Held | undefined } = globalThis as never
const slot = Symbol.for('lodeterm.catalogue')

function held(): Held {
  const existing = holder[slot]
  if (existing) return existing
  const made: Held = {
    snapshots: new SnapshotCache(async (edition) => buildSnapshot(await loadEdition(getDb(), edition))),
    published: new Set(),
    listener: undefined,
    latest: undefined,
    connected: false,
    generation: 0,
  }
  holder[slot] = made
  return made
}

function forgetLatest(state: Held): void {
  state.latest = undefined
  state.generation += 1
}

function ensureListener(state: Held): void {
  state.listener ??= listen(
    ['lodeterm_editions'],
    () => forgetLatest(state),
    (connected) => {
      state.connected = connected
      // an edition may have been published while nobody listened
      forgetLatest(state)
    },
  )
}

/** The edition from memory, loaded from the database when it is not there. The edition must exist (`editionExists`). */
export const getSnapshot = (edition: number): Promise<Snapshot> => held().snapshots.get(edition)

/**
 * Number of the newest edition, 0 when there is none. Kept while notifications are known to arrive, else asked each time,
 * so that no process goes on calling an old edition the latest.
 */
export async function latestEdition(): Promise<number> {
  const state = held()
  ensureListener(state)
  if (state.latest !== undefined && state.connected) return state.latest
  const generation = state.generation
  const [row] = await getDb().select({ number: editions.number }).from(editions).orderBy(desc(editions.number)).limit(1)
  const latest = row?.number ?? 0
  if (state.connected && state.generation === generation && latest > 0) state.latest = latest
  return latest
}

/** Whether edition n was published. What exists once exists for ever, so only a yes is remembered. */
export async function editionExists(n: number): Promise<boolean> {
  const state = held()
  if (state.published.has(n)) return true
  if (!Number.isInteger(n) || n < 1 || n > 2_147_483_647) return false
  const [row] = await getDb().select({ number: editions.number }).from(editions).where(eq(editions.number, n)).limit(1)
  if (row) state.published.add(n)
  return row !== undefined
}

/** Ends the listener and forgets every edition: for scripts and tests. */
export async function closeCatalogue(): Promise<void> {
  const state = holder[slot]
  holder[slot] = undefined
  await state?.listener?.close()
}
