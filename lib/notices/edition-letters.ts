import { and, asc, eq, inArray, sql } from 'drizzle-orm'
import { type Db, getDb, type Tx } from '@/db/client'
import type { EventPayloads } from '@/db/events'
import { amendmentAuthors, amendments, follows, reviews, users } from '@/db/schema'
import { getSnapshot } from '@/lib/catalogue/snapshot'
import { type AmendmentNews, editionMail, type FollowedNews } from '@/lib/mail/edition-mail'
import type { Message } from '@/lib/mail/messages'
import { News } from '@/lib/notices/news'
import { compareEditions } from '@/lib/prediction/comparison'
import { describeDifferences } from '@/lib/prediction/comparison-details'

type Published = EventPayloads['edition.published']

/** Whom mail can reach: accounts that are open and that somebody signs in to. */
const reachable = and(eq(users.active, true), sql`${users.passwordHash} is not null`)
const who = { email: users.email, name: users.name }

/** Everyone who wrote or reviewed what went into the edition; who did both for one amendment counts as its author. */
async function takingPart(tx: Tx | Db, edition: number): Promise<{ email: string; name: string; amendment: AmendmentNews }[]> {
  const named = { ...who, id: amendments.id, title: amendments.title }
  const inIt = and(reachable, eq(amendments.publishedIn, edition))
  const first = await tx.select(named).from(amendments).innerJoin(users, eq(users.id, amendments.author)).where(inIt).orderBy(asc(amendments.createdAt), asc(amendments.id))
  const others = await tx.select(named).from(amendments).innerJoin(amendmentAuthors, eq(amendmentAuthors.amendmentId, amendments.id))
    .innerJoin(users, eq(users.id, amendmentAuthors.userId)).where(inIt).orderBy(asc(amendments.createdAt), asc(amendments.id))
  const reviewers = await tx.select(named).from(amendments).innerJoin(reviews, eq(reviews.amendmentId, amendments.id))
    .innerJoin(users, eq(users.id, reviews.closedBy)).where(and(inIt, inArray(reviews.outcome, ['accepted', 'returned']))).orderBy(asc(amendments.createdAt), asc(amendments.id))
  const told = new Set<string>()
  return [...first.map((row) => ({ ...row, part: 'author' as const })), ...others.map((row) => ({ ...row, part: 'author' as const })), ...reviewers.map((row) => ({ ...row, part: 'reviewer' as const }))].flatMap(({ email, name, id, title, part }) => {
    const key = `${email} ${id}`
    if (told.has(key)) return []
    told.add(key)
    return [{ email, name, amendment: { id, title, part } }]
  })
}

/** News of what people follow, by person, in the order in which they began to follow. */
async function followedNews(tx: Tx | Db, { edition, since }: Published): Promise<{ email: string; name: string; news: FollowedNews }[]> {
  if (since < 1) return []
  const followed = await tx.select({ ...who, kind: follows.kind, subject: follows.subject }).from(follows)
    .innerJoin(users, eq(users.id, follows.userId)).where(reachable).orderBy(asc(follows.createdAt), asc(follows.id))
  if (followed.length === 0) return []
  const [earlier, later, differences] = await Promise.all([getSnapshot(since), getSnapshot(edition), compareEditions(getDb(), edition, since)])
  const news = new News(earlier, later, { differences, describe: (some) => describeDifferences(getDb(), edition, since, some) })
  const told: { email: string; name: string; news: FollowedNews }[] = []
  for (const { email, name, kind, subject } of followed) {
    const one = await news.of(kind, subject)
    if (one !== null) told.push({ email, name, news: one })
  }
  return told
}

/** One letter to each who follows anything that the edition changed, or wrote or reviewed any of it. */
export async function editionLetters(tx: Tx | Db, edition: Published): Promise<(Message & { to: string })[]> {
  const people = new Map<string, { name: string; amendments: AmendmentNews[]; news: FollowedNews[] }>()
  const person = (email: string, name: string) => {
    const known = people.get(email) ?? { name, amendments: [], news: [] }
    people.set(email, known)
    return known
  }
  for (const { email, name, amendment } of await takingPart(tx, edition.edition)) person(email, name).amendments.push(amendment)
  for (const { email, name, news } of await followedNews(tx, edition)) person(email, name).news.push(news)
  return [...people].map(([to, { name, amendments: own, news }]) => ({ to, ...editionMail(edition, name, news, own) }))
}
