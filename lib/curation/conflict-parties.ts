import type { ChangeKind, Finding } from '@/openapi/schemas/change'
import { checkChangesInSteps } from './checks'
import type { Accepted, AcceptedChange } from './publish-accepted'
import type { Checked } from './rows'

/** The changes of other amendments that take part in an error of the union. */
export type Parties = (change: AcceptedChange, finding: Finding) => readonly AcceptedChange[]

/** Searching goes on no longer than this; what is not found by then is told with every amendment that it can be. */
const LONGEST_MS = 10_000
const MOST_NAMED = 20
/** Where a cause is looked for first: a core or a nucleus decides over many levels. */
const ORDER: readonly ChangeKind[] = ['species', 'isotope', 'hyperfine', 'level', 'source']

const errorsOf = (checked: ReadonlyMap<string, Checked>, change: AcceptedChange): Finding[] => checked.get(change.id)?.findings.filter(({ severity }) => severity === 'error') ?? []
const has = (checked: ReadonlyMap<string, Checked> | undefined, change: AcceptedChange, { code, field }: Finding): boolean => checked !== undefined && errorsOf(checked, change).some((one) => one.code === code && one.field === field)

/** What one amendment changes in a species, and what the others do there. */
interface Sides { own: AcceptedChange[]; others: AcceptedChange[]; alone: Map<string, Checked>; known: { part: AcceptedChange[]; checked: Map<string, Checked> }[] }

/** One change of each amendment, and as many more as a message can hold. */
function shortened(part: readonly AcceptedChange[]): AcceptedChange[] {
  const firsts = part.filter((one, at) => part.findIndex(({ amendment }) => amendment === one.amendment) === at)
  return part.length <= MOST_NAMED ? [...part] : firsts
}

/**
 * Finds for every error that an amendment would not have alone which changes of the others bring it: the check is made again with
 * halves of them, until no half of what is left does.
 */
export async function findParties({ amendments, changes, table }: Pick<Accepted, 'amendments' | 'changes' | 'table'>, checked: ReadonlyMap<string, Checked>): Promise<Parties> {
  const found = new Map<string, readonly AcceptedChange[]>()
  const key = (change: AcceptedChange, { code, field }: Finding): string => `${change.id} ${code} ${field ?? ''}`
  const wrong = amendments.length < 2 ? [] : changes.filter((change) => errorsOf(checked, change).length > 0)
  const until = Date.now() + LONGEST_MS
  const sides = new Map<string, Sides>()

  const check = async (list: readonly AcceptedChange[]) => {
    const results = await checkChangesInSteps(table, list)
    return new Map(results.map((one, at) => [list[at]?.id ?? '', one]))
  }
  const sidesOf = async (change: AcceptedChange): Promise<Sides> => {
    const name = `${change.amendment} ${change.speciesId ?? ''}`
    const known = sides.get(name)
    if (known !== undefined) return known
    const near = changes.filter((one) => one.kind === 'source' || one.speciesId === change.speciesId)
    const own = near.filter((one) => one.amendment === change.amendment)
    const subjects = new Set(own.map((one) => `${one.kind} ${one.subject}`))
    const others = near.filter((one) => one.amendment !== change.amendment && checked.has(one.id) && !subjects.has(`${one.kind} ${one.subject}`))
    others.sort((a, b) => ORDER.indexOf(a.kind) - ORDER.indexOf(b.kind))
    const made: Sides = { own, others, alone: await check(own), known: [] }
    sides.set(name, made)
    return made
  }
  const search = async (side: Sides, change: AcceptedChange, finding: Finding): Promise<readonly AcceptedChange[]> => {
    const before = side.known.find((one) => has(one.checked, change, finding))
    if (before !== undefined) return before.part
    const test = async (part: AcceptedChange[]) => {
      if (part.length === 0 || Date.now() > until) return false
      const result = await check([...side.own, ...part])
      if (!has(result, change, finding)) return false
      side.known.unshift({ part, checked: result })
      return true
    }
    let part = side.others
    for (;;) {
      const half = Math.ceil(part.length / 2)
      const [first, second] = [part.slice(0, half), part.slice(half)]
      if (part.length > 1 && (await test(first))) part = first
      else if (part.length > 1 && (await test(second))) part = second
      else return part
    }
  }

  for (const change of wrong) {
    const side = await sidesOf(change)
    for (const finding of errorsOf(checked, change)) {
      if (!has(side.alone, change, finding)) found.set(key(change, finding), shortened(await search(side, change, finding)))
    }
  }
  return (change, finding) => found.get(key(change, finding)) ?? []
}
