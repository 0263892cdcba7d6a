import type { Store } from './unsent'

const MARK = 'lodeterm page '
let made = 0

/** A name for what this page keeps, and a lock of that name for as long as it lives, so that others know. */
export function pageName(): { name: string; end: () => void } {
  const name = `${Date.now().toString(36)}-${Math.random().toString(36).slice(2)}-${(made += 1)}`
  let end = () => undefined as void
  const lived = new Promise<void>((done) => { end = done })
  if (hasLocks()) void navigator.locks.request(`${MARK}${name}`, () => lived).catch(() => undefined)
  return { name, end }
}

/** Pages of this browser that are open; where it cannot tell, none: a version written twice is found by its entity tag. */
export async function openPages(): Promise<ReadonlySet<string>> {
  if (!hasLocks()) return new Set()
  const { held = [] } = await navigator.locks.query()
  return new Set(held.flatMap(({ name }) => (name?.startsWith(MARK) === true ? [name.slice(MARK.length)] : [])))
}

/** Browsers offer locks to addresses that they trust. */
const hasLocks = (): boolean => typeof navigator !== 'undefined' && 'locks' in navigator

/** Null where the browser keeps nothing. */
export function storageOfBrowser(): Store | null {
  try {
    return window.localStorage
  } catch {
    return null
  }
}
