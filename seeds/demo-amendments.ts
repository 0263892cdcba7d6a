import { eq } from 'drizzle-orm'
import type { Db } from '@/db/client'
import { amendments, users } from '@/db/schema'
import type { Acting } from '@/lib/access/audit'
import { createAmendment, readAmendment } from '@/lib/curation/amendments'
import { addChange } from '@/lib/curation/changes'
import { submitAmendment } from '@/lib/curation/reviews'
import { loadPublishedTable, newestEdition } from '@/lib/curation/table'
import { writeValues } from '@/lib/curation/values'

const NOTE = 'Invented for the demo: nobody measured these digits, and the source does not exist. Withdraw it, or take it as something to try on.'

interface Demo { who: string; title: string; level: string; shiftInvcm: number; source: string; comment: string | null; asks: string | null }
const DEMOS: readonly Demo[] = [
  { who: 'curator', title: 'Demo, invented: Na I 3p 2P*3/2 moved by 0.01 cm⁻¹', level: 'Na-I.3', shiftInvcm: 0.01, source: 'demo-invented-sodium', comment: null, asks: null },
  {
    who: 'second.curator', title: 'Demo, invented: K I 4p 2P*1/2 moved by 0.004 cm⁻¹', level: 'K-I.2', shiftInvcm: 0.004, source: 'demo-invented-potassium',
    comment: 'Demo: the shift is meant, and invented.', asks: 'Demo: please look whether the D1 line goes where it should.',
  },
]

/** Acts as a demo account, from no browser: an audit row of it names the person and no session. */
async function actingAs(db: Db, who: string): Promise<Acting | null> {
  const [user] = await db.select().from(users).where(eq(users.email, `${who}@lodeterm.example`))
  if (user === undefined || !user.demo) return null
  const caller = { kind: 'session', role: user.role, userId: user.id, sessionId: null as unknown as string, name: user.name } as const
  return { caller, ip: null, requestId: null }
}

/**
 * Two amendments for a first visitor to find on the dashboard, each saying that it is invented: a draft with warnings that nobody has
 * answered, and one that waits for a review. Only where there is none at all; answers how many were made.
 */
export async function makeDemoAmendments(db: Db): Promise<number> {
  if ((await db.$count(amendments)) > 0) return 0
  let made = 0
  for (const { who, title, level, shiftInvcm, source, comment, asks } of DEMOS) {
    const acting = await actingAs(db, who)
    const table = await loadPublishedTable(db, await newestEdition(db), [level.slice(0, level.indexOf('.'))])
    const published = table.levels.get(level)?.row
    if (acting === null || published === undefined) continue
    const { id } = await createAmendment(db, acting, { title, note: NOTE })
    await addChange(db, acting, id, { kind: 'source', action: 'create', source, values: { citation: 'Invented for the demo; there is no such publication', kind: 'other', note: NOTE } })
    await addChange(db, acting, id, {
      action: 'replace', level, ...(comment === null ? {} : { comment }),
      values: { ...writeValues('level', published), energy_invcm: null, energy_literal: (published.energyInvcm + shiftInvcm).toFixed(5), energy_source: source, energy_evidence: 'recalled' },
    })
    if (asks !== null) await submitAmendment(db, { acting, id, comment: asks, ifMatch: (await readAmendment(db, id, acting.caller)).etag })
    made += 1
  }
  return made
}
