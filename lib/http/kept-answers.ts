import type { Written } from '@/lib/http/answer'

/** Memory that kept answers may hold together, and how large one may be: long lists are rarely asked twice. */
export const KEPT_BYTES = 32 * 1024 * 1024
const LARGEST = 64 * 1024
/** A map entry, its key and headers, beside the text. */
const OVERHEAD = 600

/**
 * Answers of this process by their derived entity tag, the least recently asked forgotten first. The tag is made from everything
 * that decides such an answer (operation, edition, physics, path, query, format), so what is kept under it cannot be out of date,
 * and who asks is settled before it is looked at.
 */
export class KeptAnswers {
  private readonly answers = new Map<string, Written>()
  private held = 0

  constructor(private readonly limit: number = KEPT_BYTES) {}

  get(tag: string): Written | undefined {
    const found = this.answers.get(tag)
    if (found === undefined) return undefined
    this.answers.delete(tag)
    this.answers.set(tag, found)
    return found
  }

  /** Keeps a whole, successful answer; streams and long ones are left alone. */
  keep(tag: string, written: Written): void {
    if (written.status !== 200 || typeof written.body !== 'string' || written.body.length > LARGEST || this.answers.has(tag)) return
    this.answers.set(tag, { ...written, json: null })
    this.held += sizeOf(written.body)
    for (const [oldest, { body }] of this.answers) {
      if (this.held <= this.limit) break
      this.answers.delete(oldest)
      this.held -= sizeOf(body)
    }
  }

  get size(): number {
    return this.answers.size
  }
}

/** Text held in memory takes up to two bytes a character. */
const sizeOf = (body: Written['body']): number => (typeof body === 'string' ? 2 * body.length : 0) + OVERHEAD
