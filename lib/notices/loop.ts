import { and, lt, sql } from 'drizzle-orm'
import { type Db, getDb, listen } from '@/db/client'
import { mails, noticeEvents, webhookDeliveries } from '@/db/schema'
import { shared } from '@/lib/access/shared'
import { getConfig } from '@/lib/config'
import { sendDeliveries } from '@/lib/notices/deliveries'
import { sendMails } from '@/lib/notices/mails'
import { reasonOf, spreadNext } from '@/lib/notices/spread'

/** How often it is looked whether something is due, when nobody says so. */
const EVERY_MS = 3_000
const TIDY_MS = 3_600_000

type Complain = (reason: string) => void

/** Runs `step` until it has nothing left to do. Calls while it runs make it look once more at the end, and run nothing beside it. */
function runner(step: () => Promise<boolean>, complain: Complain, then: () => void = () => undefined): () => void {
  let running = false
  let again = false
  const run = async (): Promise<void> => {
    running = true
    do {
      again = false
      try {
        let did = false
        while (await step()) did = true
        if (did) then()
      } catch (error) {
        complain(reasonOf(error))
      }
    } while (again)
    running = false
  }
  return () => {
    if (running) again = true
    else void run()
  }
}

/** What has been told for long is of no more use; the audit keeps who did what. */
async function tidy(db: Db): Promise<void> {
  const days = (number: number) => sql`now() - ${number} * interval '1 day'`
  await db.delete(mails).where(lt(mails.createdAt, days(30)))
  await db.delete(webhookDeliveries).where(and(sql`coalesce(${webhookDeliveries.deliveredAt}, ${webhookDeliveries.failedAt}) is not null`, lt(webhookDeliveries.createdAt, days(90))))
  await db.delete(noticeEvents).where(and(sql`${noticeEvents.spreadAt} is not null`, lt(noticeEvents.createdAt, days(90))))
}

/**
 * Spreads notices for as long as the process lives: woken by the database when an event is committed, and by a clock for what is to be
 * tried again. Mail servers and webhooks that are slow hold up neither each other nor the spreading. Any number of processes may do so
 * beside each other. Where no database is set it does nothing.
 */
export function startNotices(log: (reason: string) => void): void {
  const { databaseUrl, databaseAppUrl } = getConfig()
  if (databaseUrl === undefined && databaseAppUrl === undefined) return
  shared('notices', () => {
    let told = ''
    // a database that is away fails at every look: that is said once
    const complain: Complain = (reason) => {
      if (reason !== told) log(reason)
      told = reason
    }
    const send = runner(async () => (await sendMails(getDb())) > 0, complain)
    const deliver = runner(async () => (await sendDeliveries(getDb())) > 0, complain)
    const spread = runner(() => spreadNext(getDb()), complain, () => {
      send()
      deliver()
    })
    const all = (): void => {
      spread()
      send()
      deliver()
    }
    const listener = listen(['lodeterm_notices'], all, (connected) => connected && all())
    const timers = [setInterval(all, EVERY_MS), setInterval(() => void tidy(getDb()).catch((error: unknown) => complain(reasonOf(error))), TIDY_MS)]
    for (const timer of timers) timer.unref()
    return { listener, timers }
  })
}
