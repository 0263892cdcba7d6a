import { desc, eq } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import { editions } from '@/db/schema'
import { parameterProblem } from '@/lib/problem'
import { linksOfEdition } from '@/lib/prediction/links'
import type { Edition } from '@/openapi/schemas/edition'

const COLUMNS = {
  number: editions.number,
  label: editions.label,
  notes: editions.notes,
  checksum: editions.checksum,
  counts: editions.counts,
  publishedAt: editions.publishedAt,
  publishedBy: editions.publisherName,
}

type Row = Pick<Edition, 'number' | 'label' | 'notes' | 'checksum' | 'counts'> & { publishedAt: Date; publishedBy: string | null }

const told = ({ publishedAt, publishedBy, ...row }: Row): Edition => ({
  ...row,
  published_at: publishedAt.toISOString(),
  published_by: publishedBy,
  links: linksOfEdition(row.number),
})

/** All editions, the newest first. */
export async function readEditions(db: Db | Tx): Promise<Edition[]> {
  const rows = await db.select(COLUMNS).from(editions).orderBy(desc(editions.number))
  return rows.map(told)
}

/** One edition; 404 `edition_unknown`. */
export async function readEdition(db: Db | Tx, number: number): Promise<Edition> {
  const [row] = await db.select(COLUMNS).from(editions).where(eq(editions.number, number)).limit(1)
  if (!row) throw parameterProblem('n', 'edition_unknown', `There is no edition ${number}; GET /api/v1/editions lists all.`)
  return told(row)
}

/** What an edition's canonical text begins with; 404 `edition_unknown`. */
export async function readEditionHead(db: Db | Tx, number: number) {
  const [row] = await db.select().from(editions).where(eq(editions.number, number)).limit(1)
  if (!row) throw parameterProblem('n', 'edition_unknown', `There is no edition ${number}; GET /api/v1/editions lists all.`)
  return row
}
