import { createHash } from 'node:crypto'
import { Problem } from '@/lib/problem'

/** A strong entity tag from whatever decides a representation, byte for byte. */
export const entityTag = (...parts: readonly (string | number | null)[]): string =>
  `"${createHash('sha256').update(JSON.stringify(parts)).digest('base64url').slice(0, 27)}"`

/** 412; `current` is what is there now, so that whoever was too late can lay both versions side by side. */
export const staleProblem = (current?: unknown): Problem =>
  new Problem('etag_stale', 'This was changed after you read it; nothing was overwritten. Read it again and make your change on what is there now.', current === undefined ? {} : { extra: { current } })

/** 412 where the version there now is not the one the change was made from. */
export function requireVersion(ifMatch: string | null, current: string): void {
  if (ifMatch !== current) throw staleProblem()
}
