/** Queues of several callers that are served in turn: each caller's first, then each one's second, whoever asked for how much. */
export class Turns<T> {
  /** In the order of turns; a caller that was served goes to the end. */
  private readonly queues = new Map<string, T[]>()

  add(caller: string, item: T): void {
    const queue = this.queues.get(caller)
    if (queue === undefined) this.queues.set(caller, [item])
    else queue.push(item)
  }

  /** The next item of the first caller that may be served. */
  take(may: (caller: string) => boolean): T | undefined {
    for (const [caller, queue] of this.queues) {
      if (!may(caller)) continue
      const item = queue.shift()
      this.queues.delete(caller)
      if (queue.length > 0) this.queues.set(caller, queue)
      return item
    }
    return undefined
  }

  /** Takes an item out of its queue; false where it is not there. */
  remove(caller: string, item: T): boolean {
    const queue = this.queues.get(caller)
    const at = queue?.indexOf(item) ?? -1
    if (queue === undefined || at < 0) return false
    queue.splice(at, 1)
    if (queue.length === 0) this.queues.delete(caller)
    return true
  }

  of(caller: string): number {
    return this.queues.get(caller)?.length ?? 0
  }

  get size(): number {
    let size = 0
    for (const queue of this.queues.values()) size += queue.length
    return size
  }
}
