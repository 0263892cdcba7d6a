import type { Instance } from './instance'

/** What a request sends along as one of the demo accounts. */
export type Signed = Awaited<ReturnType<Instance['signIn']>>
export interface People { author: Signed; reviewer: Signed; admin: Signed; reader: Signed }

const WHO = { author: 'curator', reviewer: 'second.curator', admin: 'admin', reader: 'reader' } as const

/** Signs in the four people that a change passes through: who writes it, who reviews it, who publishes it, who reads of it. */
export async function signInAll(instance: Pick<Instance, 'signIn'>): Promise<People> {
  const [author, reviewer, admin, reader] = await Promise.all([WHO.author, WHO.reviewer, WHO.admin, WHO.reader].map((who) => instance.signIn(who)))
  if (author === undefined || reviewer === undefined || admin === undefined || reader === undefined) throw new Error('not everybody is signed in')
  return { author, reviewer, admin, reader }
}

/** The same with an entity tag for If-Match. */
export const withTag = (signed: Signed, etag: string): Signed => ({ ...signed, headers: { ...signed.headers, 'if-match': etag } })
