import type { AmendmentChange, BatchItem } from '@/openapi/schemas/change'
import type { Values } from '@/app/(curate)/_sheet/change-state'
import type { Transport } from '@/app/(curate)/_sheet/saver'
import { ApiError } from '@/app/_components/data/api'

const AT = '2030-01-01T00:00:00.000Z'

export const madeChange = (given: Partial<AmendmentChange> & { subject: string }): AmendmentChange => ({
  id: `id-${given.subject}`, amendment: 'amendment', kind: 'level', action: 'replace', species: 'Na-I', level: given.subject, values: {}, reason: null, successor: null,
  comment: null, base_revision: 1, current_revision: 1, before: null, after: null, fields: [], findings: [], author: { id: 'one', name: 'One' }, import_row: null, version: 1, etag: '"1"',
  created_at: AT, updated_at: AT, ...given,
})

export const refusal = (status: number, extra: Record<string, unknown> = {}): ApiError => new ApiError({ type: 'about:blank', title: 'No', status, detail: 'no', ...extra })

/** A server in memory: numbers levels, counts versions, refuses stale tags; `fail` is thrown once by the next write. */
export class FakeServer implements Transport {
  readonly changes = new Map<string, AmendmentChange>()
  readonly published = new Map<string, Values>()
  readonly revisions = new Map<string, number>()
  readonly items: BatchItem[] = []
  readonly calls: string[] = []
  readonly keys: string[] = []
  farewells: { items: BatchItem[]; remove: { change: string; etag: string }[] }[] = []
  fail: Error | null = null
  #next = 50
  #made = 0

  #refuse(): void {
    const { fail } = this
    this.fail = null
    if (fail !== null) throw fail
  }
  #stored(item: BatchItem, id: string | null): AmendmentChange {
    this.items.push(item)
    const before = id === null ? undefined : this.changes.get(id)
    const subject = before?.subject ?? item.level ?? item.source ?? `${item.species}.${(this.#next += 1)}`
    const version = (before?.version ?? 0) + 1
    const change = madeChange({
      id: id ?? `id-${subject}`, subject, level: item.kind === 'level' ? subject : null, kind: item.kind ?? 'level', action: item.action, values: (item.values ?? null) as AmendmentChange['values'],
      before: (this.published.get(subject) ?? null) as AmendmentChange['before'], reason: item.reason ?? null, successor: item.successor ?? null, comment: item.comment ?? null, base_revision: item.base_revision ?? before?.base_revision ?? 1, current_revision: this.revisions.get(subject) ?? 1, version, etag: `"${version}"`,
    })
    this.changes.set(change.id, change)
    return change
  }
  #check(id: string, etag: string): void {
    const now = this.changes.get(id)
    if (now === undefined) throw refusal(404, { code: 'change_unknown' })
    if (now.etag !== etag) throw refusal(412, { code: 'etag_stale', current: now })
  }

  create = async (item: BatchItem, key: string) => {
    this.calls.push('create')
    this.keys.push(key)
    this.#refuse()
    return this.#stored(item, null)
  }
  replace = async (id: string, etag: string, item: BatchItem) => {
    this.calls.push('replace')
    this.#refuse()
    this.#check(id, etag)
    return this.#stored(item, id)
  }
  remove = async (id: string, etag: string) => {
    this.calls.push('remove')
    this.#refuse()
    this.#check(id, etag)
    this.changes.delete(id)
  }
  batch = async (items: BatchItem[], remove: { change: string; etag: string }[], key: string) => {
    this.calls.push(`batch ${items.length}+${remove.length}`)
    this.keys.push(key)
    this.#refuse()
    for (const { change, etag } of [...items, ...remove]) if (change !== undefined) this.#check(change, etag ?? '')
    for (const { change } of remove) this.changes.delete(change)
    return items.map((item) => this.#stored(item, item.change ?? null))
  }
  read = async (id: string) => this.changes.get(id) ?? null
  list = async () => [...this.changes.values()]
  values = async (level: string) => {
    this.calls.push(`values ${level}`)
    return { values: this.published.get(level) ?? {}, revision: this.revisions.get(level) ?? 1 }
  }
  farewell = (items: BatchItem[], remove: { change: string; etag: string }[]) => void this.farewells.push({ items, remove })
  newKey = () => `key-${(this.#made += 1)}`

  /** What a colleague does meanwhile. */
  meanwhile(subject: string, values: Values): void {
    const change = [...this.changes.values()].find((one) => one.subject === subject)
    if (change === undefined) throw new Error(`no change of ${subject}`)
    this.changes.set(change.id, { ...change, values: values as AmendmentChange['values'], version: change.version + 1, etag: `"${change.version + 1}"` })
  }
}
