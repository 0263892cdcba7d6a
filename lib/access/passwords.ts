import { Algorithm, hash, verify } from '@node-rs/argon2'
import { isCommonPassword } from '@/lib/access/common-passwords'
import { bodyProblem, Problem } from '@/lib/problem'

const OPTIONS = { algorithm: 2 satisfies Algorithm.Argon2id, memoryCost: 19_456, timeCost: 2, parallelism: 1 }

export const PASSWORD_MIN = 8
export const PASSWORD_MAX = 128

/** Hashing takes 19 MiB and a core: at most this many at once, and no endless queue before them. */
const AT_ONCE = 2
const WAITING = 64
let running = 0
const queue: (() => void)[] = []

async function inTurn<T>(task: () => Promise<T>): Promise<T> {
  if (running >= AT_ONCE) {
    if (queue.length >= WAITING) throw new Problem('sign_in_unavailable', 'Too many people are signing in at this moment; try again shortly.', { headers: { 'retry-after': '5' } })
    await new Promise<void>((go) => queue.push(go))
  } else running += 1
  try {
    return await task()
  } finally {
    const next = queue.shift()
    if (next === undefined) running -= 1
    else next()
  }
}

/** Characters as a person counts them. */
const lengthOf = (password: string): number => [...password].length

/** Refuses a password that is too short, too long or too common; there are no rules of composition. `pointer` is its place in the body. */
export function checkPassword(password: string, pointer: string): void {
  const length = lengthOf(password)
  if (length < PASSWORD_MIN) throw bodyProblem(pointer, 'password_too_short', `A password has at least ${PASSWORD_MIN} characters; this has ${length}.`)
  if (length > PASSWORD_MAX) throw bodyProblem(pointer, 'password_too_long', `A password has at most ${PASSWORD_MAX} characters; this has ${length}.`)
  if (isCommonPassword(password)) throw bodyProblem(pointer, 'password_common', 'This password is among the first that anyone would guess; choose another.')
}

/** argon2id in PHC form; m = 19 456 KiB, t = 2, p = 1. */
export const hashPassword = (password: string): Promise<string> => inTurn(() => hash(password.normalize('NFC'), OPTIONS))

// The hash of a password that nobody has, made once, so that an account that does not exist costs the same time.
let nobody: Promise<string> | undefined
const nobodysHash = (): Promise<string> => (nobody ??= hash(`nobody ${Math.random()}`, OPTIONS))

/** Whether a password belongs to a hash; with no hash the same work is done and the answer is no. */
export async function verifyPassword(passwordHash: string | null, password: string): Promise<boolean> {
  if (lengthOf(password) > PASSWORD_MAX) return false
  const against = passwordHash ?? (await nobodysHash())
  const fits = await inTurn(() => verify(against, password.normalize('NFC')))
  return fits && passwordHash !== null
}
