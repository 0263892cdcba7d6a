import type { Role } from '@/openapi/core/define'

/** A stranger, a person in a browser, or a key. `role` is the one in force: a key's own where it is narrower. */
export type Caller =
  | { kind: 'anonymous'; role: null; userId: null }
  | { kind: 'session'; role: Role; userId: string; sessionId: string; name: string }
  | { kind: 'key'; role: Role; userId: string; keyId: string; name: string; expiresAt: Date | null }

export const ANONYMOUS: Caller = { kind: 'anonymous', role: null, userId: null }

const RANK: Record<Role, number> = { reader: 1, curator: 2, admin: 3 }

/** Whether `role` is at least `needed`. */
export const atLeast = (role: Role, needed: Role): boolean => RANK[role] >= RANK[needed]

/** The lower of two roles. */
export const lowerRole = (a: Role, b: Role): Role => (RANK[a] <= RANK[b] ? a : b)
