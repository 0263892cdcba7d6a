// Recomputes an edition's checksum: from the download of a running server, or from the database itself.
import { createHash } from 'node:crypto'
import { parseArgs } from 'node:util'
import { asc } from 'drizzle-orm'
import { canonicalSha256, type Json } from '@/db/canonical'
import { closeDb, getDb } from '@/db/client'
import { verifyEdition } from '@/db/edition-content'
import { editions } from '@/db/schema'

const USAGE = 'npm run verify-edition -- N [--url http://127.0.0.1:3000] [--key ldt_...] | npm run verify-edition -- N --database'

interface Wanted { numbers: number[] | 'all'; url: string; key: string | undefined; database: boolean }

function readArguments(): Wanted | string {
  try {
    const { values, positionals } = parseArgs({ options: { url: { type: 'string' }, key: { type: 'string' }, database: { type: 'boolean', default: false }, all: { type: 'boolean', default: false } }, allowPositionals: true })
    const numbers = positionals.map(Number)
    if (values.all && !values.database) return '--all goes with --database'
    if (!values.all && numbers.length === 0) return 'which edition? Give its number'
    if (numbers.some((n) => !Number.isSafeInteger(n) || n < 1)) return 'an edition is named by its number'
    if (values.database && values.url !== undefined) return 'either --url or --database'
    const url = values.url ?? process.env.BASE_URL ?? `http://127.0.0.1:${process.env.PORT ?? 3000}`
    return { numbers: values.all ? 'all' : numbers, url: url.replace(/\/+$/, ''), key: values.key ?? process.env.LODETERM_KEY, database: values.database }
  } catch (error) {
    return error instanceof Error ? error.message : String(error)
  }
}

interface Sums { stored: string; computed: string; how: string }

async function download(at: string, key: string | undefined): Promise<Buffer> {
  const answer = await fetch(at, { headers: key === undefined ? {} : { authorization: `Bearer ${key}` } })
  const body = Buffer.from(await answer.arrayBuffer())
  if (!answer.ok) throw new Error(`${at} answered ${answer.status}: ${body.toString('utf8').slice(0, 300)}`)
  return body
}

/** The bytes as they came have the checksum, and so has what is parsed from them and written again by RFC 8785. */
async function fromServer(n: number, url: string, key: string | undefined): Promise<Sums> {
  const edition = JSON.parse((await download(`${url}/api/v1/editions/${n}`, key)).toString('utf8')) as { data: { checksum: string } }
  const body = await download(`${url}/api/v1/editions/${n}/content`, key)
  const raw = createHash('sha256').update(body).digest('hex')
  const parsed = JSON.parse(body.toString('utf8')) as Json
  const again = canonicalSha256(parsed)
  const number = typeof parsed === 'object' && parsed !== null && !Array.isArray(parsed) ? (parsed as { readonly number?: Json }).number : undefined
  const how = `${(body.length / 1e6).toFixed(1)} MB from ${url}`
  if (number !== n) return { stored: edition.data.checksum, computed: `content of edition ${JSON.stringify(number)}`, how }
  return { stored: edition.data.checksum, computed: raw === again ? raw : `${raw} as sent, ${again} written anew`, how }
}

async function fromDatabase(n: number): Promise<Sums> {
  const sums = await verifyEdition(getDb(), n)
  if (sums === null) throw new Error(`There is no edition ${n} in the database`)
  return { ...sums, how: 'from the database' }
}

async function run({ numbers, url, key, database }: Wanted): Promise<boolean> {
  const list = numbers === 'all' ? (await getDb().select({ n: editions.number }).from(editions).orderBy(asc(editions.number))).map(({ n }) => n) : numbers
  let good = true
  for (const n of list) {
    const { stored, computed, how } = database ? await fromDatabase(n) : await fromServer(n, url, key)
    const same = stored === computed
    good &&= same
    console.log(same ? `edition ${n}: ${stored} agrees (${how})` : `edition ${n}: DIFFERS (${how})\n  published ${stored}\n  computed  ${computed}`)
  }
  return good
}

const wanted = readArguments()
if (typeof wanted === 'string') {
  console.error(`${wanted}\n${USAGE}`)
  process.exitCode = 2
} else {
  try {
    process.exitCode = (await run(wanted)) ? 0 : 1
  } catch (error) {
    console.error(error instanceof Error ? `${error.message}${error.cause instanceof Error ? ` (${error.cause.message})` : ''}` : String(error))
    process.exitCode = 2
  } finally {
    if (wanted.database) await closeDb()
  }
}
