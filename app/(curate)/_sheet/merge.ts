import { canonical, type ChangeState, type Values } from './change-state'

/** One value on which two versions of a change do not agree, or where they differ from what both began with. */
export interface Clash { field: string; base: unknown; mine: unknown; theirs: unknown; differ: boolean }
export type Side = 'mine' | 'theirs'

const PARTS = ['action', 'reason', 'successor', 'comment'] as const

/** Every value that either side changed, in the order given; `differ` marks those where a choice is needed. */
export function clashes(base: ChangeState | null, mine: ChangeState | null, theirs: ChangeState | null, order: readonly string[] = []): Clash[] {
  const names = new Set([...order, ...[base, mine, theirs].flatMap((state) => Object.keys(state?.values ?? {}))])
  const fields = [...PARTS.map((field) => ({ field, of: (state: ChangeState | null) => state?.[field] ?? null })),
    ...[...names].map((field) => ({ field, of: (state: ChangeState | null) => (state?.values ?? {})[field] ?? null }))]
  return fields
    .map(({ field, of }): Clash => ({ field, base: of(base), mine: of(mine), theirs: of(theirs), differ: !same(of(mine), of(theirs)) }))
    .filter((clash) => clash.differ || (!same(clash.base, clash.mine) && !isFollowing(clash)))
}

/** The number of an energy goes when its digits are typed, and follows from them: nothing to be told. */
const isFollowing = ({ field, mine, theirs }: Clash): boolean => field === 'energy_invcm' && (mine ?? null) === null && (theirs ?? null) === null

const same = (a: unknown, b: unknown): boolean => canonical({ a }) === canonical({ a: b })

/** Where only one side moved away from the common beginning, that side is the natural choice. */
export function suggested({ base, mine, theirs }: Clash): Side {
  return same(base, mine) && !same(base, theirs) ? 'theirs' : 'mine'
}

/** The change put together from choices; what was not chosen stays mine. */
export function merged(mine: ChangeState | null, theirs: ChangeState | null, choices: Readonly<Record<string, Side>>): ChangeState | null {
  if (mine === null || theirs === null) return choices.action === 'theirs' ? theirs : mine
  const values: Record<string, unknown> = { ...mine.values }
  const next = { ...mine }
  for (const [field, side] of Object.entries(choices)) {
    if (side !== 'theirs') continue
    if (field === 'action') next.action = theirs.action
    else if (field === 'reason' || field === 'successor' || field === 'comment') next[field] = theirs[field]
    else values[field] = (theirs.values ?? {})[field] ?? null
  }
  const chosen: Values = next.action === 'retire' ? {} : values
  return { ...next, values: next.action === 'retire' ? null : chosen }
}
