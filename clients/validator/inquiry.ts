import { type Components, type Level, type ListId, type Lodeterm, type OperationId, OPERATIONS, type Parameters, ProblemError, type Row, type Transition } from '../typescript'
import type { Random } from './random'

/** A claim that did not hold, with the request that shows it. */
export interface Failure { claim: string; request: string }

/** Thrown where a check finds nothing to check on this instance; the reason is told. */
export class NothingToCheck extends Error {}

/** What a check works with: the table at one edition, some of its levels and lines, and a place to put what it found. */
export class Inquiry {
  claims = 0
  readonly failures: Failure[] = []
  #asked = ''

  constructor(
    /** Held at one edition. */
    readonly table: Lodeterm,
    readonly edition: number,
    readonly random: Random,
    readonly levels: readonly Level[],
    readonly lines: readonly Transition[],
    /** How many things are drawn for a check. */
    readonly count: number,
    /** Operations of the live document, `get /levels` and the like. */
    readonly live: ReadonlySet<string>,
  ) {}

  /** What is claimed of the request last noted. `told` says what was found; it is only made where the claim fails. */
  claim(holds: boolean, told: () => string): void {
    this.claims += 1
    if (!holds) this.failures.push({ claim: told(), request: this.#asked })
  }

  /** Two numbers no farther apart than `tolerance`; a number that is none fails. */
  near(found: number | null | undefined, wanted: number | null | undefined, tolerance: number, what: string): void {
    const holds = typeof found === 'number' && typeof wanted === 'number' && Math.abs(found - wanted) <= tolerance
    this.claim(holds, () => `${what}: ${String(found)} instead of ${String(wanted)}, allowed ${tolerance.toPrecision(3)}`)
  }

  /** Notes what is asked, so that a failure can name it. */
  note<Id extends OperationId>(operation: Id, parameters: Partial<Parameters<Id>>, body?: unknown): void {
    const { method, path } = OPERATIONS[operation]
    const given: Record<string, unknown> = { ...parameters }
    const at = path.replace(/\{([^}]+)\}/g, (_, name: string) => {
      const text = String(given[name])
      delete given[name]
      return text
    })
    const query = Object.entries(given).map(([name, value]) => `${name}=${String(value)}`).join('&')
    this.#asked = `${method.toUpperCase()} ${at}${query === '' ? '' : `?${query}`}${body === undefined ? '' : ` ${JSON.stringify(body).slice(0, 400)}`}`
  }

  /** Rows of a list, noted; at most `most`. */
  async rows<Id extends ListId>(operation: Id, parameters: Parameters<Id>, most = 5000): Promise<Row<Id>[]> {
    this.note(operation, parameters)
    const rows: Row<Id>[] = []
    for await (const row of this.table.each(operation, { limit: 1000, ...parameters })) {
      rows.push(row)
      if (rows.length >= most) break
    }
    return rows
  }

  needs(...operations: string[]): void {
    const missing = operations.filter((operation) => !this.live.has(operation))
    if (missing.length > 0) throw new NothingToCheck(`this instance does not have ${missing.join(', ')}`)
  }
}

export interface Check {
  name: string
  /** What is claimed, in a sentence. */
  claim: string
  run: (the: Inquiry) => Promise<void>
}

/** The answer, or null where the physics asked for does not exist for this line (422, such as a term with a level missing). */
export async function unlessImpossible<T>(asked: Promise<T>): Promise<T | null> {
  try {
    return await asked
  } catch (error) {
    if (error instanceof ProblemError && error.status === 422) return null
    throw error
  }
}

/** The components of a line without its nucleus, noted; null where the model does not exist for it. */
export async function componentsOf(the: Inquiry, line: Transition, options: Partial<Parameters<'getComponents'>>): Promise<Components | null> {
  const parameters = { transition: line.id, kind: line.kind, ...options } as Parameters<'getComponents'>
  the.note('getComponents', parameters)
  const answer = await unlessImpossible(the.table.get('getComponents', parameters))
  // hyperfine components come only where they are asked for
  return answer === null ? null : (answer.data as Components)
}
