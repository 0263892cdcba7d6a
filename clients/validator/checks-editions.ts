import type { GetId, Parameters } from '../typescript'
import { type Check, type Inquiry, NothingToCheck } from './inquiry'

/** Pinned reads, one of each kind for each thing drawn. */
function pinnedReads(the: Inquiry): [GetId, Parameters<GetId>][] {
  const reads: [GetId, Parameters<GetId>][] = []
  for (const level of the.levels) {
    reads.push(['getLevel', { level: level.id }], ['listLevelTransitions', { level: level.id, include: 'forbidden' } as never])
  }
  for (const line of the.lines) {
    reads.push(['getTransition', { transition: line.id, kind: line.kind }], ['getComponents', { transition: line.id, kind: line.kind, field: '0.1T', model: 'linear' }])
  }
  return reads
}

const immutable: Check = {
  name: 'editions',
  claim: 'What an edition answered it answers again, byte for byte and under the same entity tag.',
  async run(the) {
    const first: { body: string; etag: string | null }[] = []
    const reads = pinnedReads(the)
    for (const [operation, parameters] of reads) {
      const answer = await the.table.ask(operation, parameters as never)
      first.push({ body: await answer.text(), etag: answer.headers.get('etag') })
    }
    for (const [i, [operation, parameters]] of reads.entries()) {
      the.note(operation, parameters as never)
      const answer = await the.table.ask(operation, parameters as never)
      const [body, etag] = [await answer.text(), answer.headers.get('etag')]
      the.claim(body === first[i]?.body, () => 'the second answer differs from the first')
      the.claim(etag !== null && etag === first[i]?.etag, () => `entity tag ${String(etag)} after ${String(first[i]?.etag)}`)
    }
  },
}

const notModified: Check = {
  name: 'entity tags',
  claim: 'A pinned read with the entity tag last had is 304 without a body, with any other tag it is the whole answer.',
  async run(the) {
    for (const [operation, parameters] of pinnedReads(the)) {
      the.note(operation, parameters as never)
      const answer = await the.table.ask(operation, parameters as never)
      const etag = answer.headers.get('etag') ?? ''
      const whole = await answer.text()
      const again = await the.table.ask(operation, parameters as never, undefined, { ifNoneMatch: etag })
      the.claim(again.status === 304 && (await again.text()) === '', () => `answered ${again.status} to its own tag ${etag}`)
      const other = await the.table.ask(operation, parameters as never, undefined, { ifNoneMatch: '"another"' })
      the.claim(other.status === 200 && (await other.text()) === whole, () => `answered ${other.status} to a tag that is not its own`)
    }
  },
}

/** Content beyond this many levels is not fetched. */
const MOST_LEVELS = 20_000

const checksum: Check = {
  name: 'checksum',
  claim: 'The checksum of the edition is the SHA-256 of its content.',
  async run(the) {
    the.needs('get /editions/{n}/content')
    const parameters = { n: the.edition }
    const { data } = await the.table.get('getEdition', parameters)
    const total = data.counts.levels
    if (total > MOST_LEVELS) throw new NothingToCheck(`the edition has ${total} levels`)
    the.note('getEditionContent', parameters)
    const answer = await the.table.ask('getEditionContent', parameters)
    const digest = new Uint8Array(await crypto.subtle.digest('SHA-256', await answer.arrayBuffer()))
    const found = [...digest].map((byte) => byte.toString(16).padStart(2, '0')).join('')
    the.claim(found === data.checksum, () => `the content has ${found}, the edition says ${data.checksum}`)
  },
}

export const EDITION_CHECKS: Check[] = [immutable, notModified, checksum]
