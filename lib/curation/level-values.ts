import type { Db } from '@/db/client'
import { notFound } from '@/lib/problem'
import type { LevelValues } from '@/openapi/schemas/change'
import type { LevelRow } from './rows'
import { loadSubjects } from './table'
import { writeLevelValues } from './values'

/** The values of a level of an edition as a curator writes them. */
export async function levelValues(db: Db, edition: number, level: string): Promise<{ level: string; revision: number; edition: number; values: LevelValues }> {
  const found = (await loadSubjects(db, edition, [{ kind: 'level', subject: level }]))('level', level)
  if (found === undefined) throw notFound('level_unknown', `Edition ${edition} holds no level ${level}.`)
  return { level, revision: found.revision, edition, values: writeLevelValues(found.row as LevelRow) }
}
