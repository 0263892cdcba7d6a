import { getDb } from '@/db/client'
import { snapshotsOfAmendment, snapshotsOfChange } from '@/lib/curation/amended'
import { readChange } from '@/lib/curation/change-view'
import type { Answer } from '@/lib/http/types'
import { consequencesInSteps, consequencesOf } from '@/lib/prediction/consequences'
import type { AmendmentDetail } from '@/openapi/schemas/amendment'
import type { AmendmentChangeDetail, Consequences } from '@/openapi/schemas/change'

/** The tag is of the version that If-Match binds to; what else is shown changes without it, so nothing keeps these answers. */
const FRESH = { 'cache-control': 'no-store' }

export const amendmentAnswer = (data: AmendmentDetail, headers: Record<string, string> = {}): Answer<AmendmentDetail> => ({ data, etag: data.etag, headers: { ...FRESH, ...headers } })

const LINES_OF_CHANGE = 50
const LINES_OF_AMENDMENT = 500

/** One change with the lines it moves: where what curation keeps and what prediction computes come together. */
export async function changeAnswer(amendment: string, id: string, headers: Record<string, string> = {}): Promise<Answer<AmendmentChangeDetail>> {
  const { change, row, edition } = await readChange(getDb(), amendment, id)
  const snapshots = await snapshotsOfChange(getDb(), row, edition)
  const consequences = snapshots === null ? null : consequencesOf({ ...snapshots, edition, limit: LINES_OF_CHANGE })
  return { data: { ...change, consequences }, etag: change.etag, headers: { ...FRESH, ...headers } }
}

export async function consequencesAnswer(amendment: string): Promise<Answer<Consequences>> {
  return { data: await consequencesInSteps({ ...(await snapshotsOfAmendment(getDb(), amendment)), limit: LINES_OF_AMENDMENT }) }
}
