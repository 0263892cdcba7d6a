import type { ChangeInput, Checked, PublishedTable } from '../rows'
import { checkSteps } from './steps'

export { recheckSources } from './sources'

/**
 * Checks changes together against an edition: on the table as it would be with all of them, so a source, species or level that one of
 * them makes counts for the others. `table` must hold the species that the changes touch, whole (`loadPublishedTable`). Answers in the
 * order given: the row that each would write (null where it cannot be read, never without an error) and all that is found.
 * Pure: the same input gives the same findings.
 */
export function checkChanges(table: PublishedTable, changes: readonly ChangeInput[]): Checked[] {
  const steps = checkSteps(table, changes)
  for (;;) {
    const step = steps.next()
    if (step.done === true) return step.value
  }
}

export interface InSteps {
  /** Told now and then how many changes were read. */
  onProgress?: (done: number, total: number) => void
  /** Ends it early: the promise is rejected with the signal's reason. */
  signal?: AbortSignal
  /** Pieces of work between two pauses. */
  pauseEvery?: number
}

const nextTurn = (): Promise<void> => new Promise((resolve) => void setImmediate(resolve))

/** The same for many changes, giving the event loop back regularly. */
export async function checkChangesInSteps(table: PublishedTable, changes: readonly ChangeInput[], { onProgress, signal, pauseEvery = 200 }: InSteps = {}): Promise<Checked[]> {
  const steps = checkSteps(table, changes)
  for (let done = 0; ; done += 1) {
    const step = steps.next()
    if (step.done === true) {
      onProgress?.(changes.length, changes.length)
      return step.value
    }
    if (done % pauseEvery !== pauseEvery - 1) continue
    onProgress?.(Math.min(done + 1, changes.length), changes.length)
    await nextTurn()
    signal?.throwIfAborted()
  }
}
