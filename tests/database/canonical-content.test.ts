import { afterAll, expect, it } from 'vitest'
import { canonicalJson, type Json } from '@/db/canonical'
import { closeDb, getDb, type Tx } from '@/db/client'
import { canonicalEdition } from '@/db/edition-content'
import { measuredG, measuredGRevisions } from '@/db/schema'

const db = getDb()
afterAll(closeDb)

/** Where ECMAScript and PostgreSQL change over to an exponent, where ties lie, and what lies at the ends. */
const NUMBERS = [
  0.1 + 0.2, 1 / 3, 2 / 3, 1e-4, 1.5e-4, 9.9e-5, 1e-5, 1e-6, 1.25e-6, 1e-7, 123456.789e-12, 5e-324, 2.2250738585072014e-308, 1e14, 123456789012345, 999999999999999.9, 1e15, 1.5e15,
  2 ** 53, 2 ** 53 + 2, 9007199254740993, 1e16, 1e20, 1e21, 1e22, 1e23, 1.7976931348623157e308, 4503599627370496.5, 4503599627370497.5, 100, 50_037.125, 16956.17025, -0, -1e-9, -12.5,
]
const NOTES = ['1e-5', ':1e+5,', 'a "quoted" \\ word', 'tab\tline\nbreak\u0001\u001f\u007f', '\u2028\u2029', '\u{1f600} \u00e9 \u03b1', '</script>', '"status":"active"']

async function textOf(tx: Tx): Promise<string> {
  let text = ''
  for await (const part of canonicalEdition(tx, { number: 2, label: 'Numbers', notes: '', constants: 'CODATA 2022' })) text += part
  return text
}

it('writes any number and any text in the one form of RFC 8785', async () => {
  class Undo extends Error {}
  let text = ''
  const seed = [...NUMBERS]
  for (let at = 1; at <= 400; at += 1) seed.push(Number((Math.sin(at) * 10 ** ((at % 40) - 20)).toPrecision(1 + (at % 17))))
  await db.transaction(async (tx) => {
    const ids = await tx.insert(measuredG).values(seed.map(() => ({ levelId: 'Na-I.1' }))).returning({ id: measuredG.id })
    await tx.insert(measuredGRevisions).values(ids.map(({ id }, at) => ({ measuredGId: id, value: seed[at] ?? 0, source: 'erickson-1977-h', evidence: 'read' as const, note: NOTES[at % NOTES.length] ?? null, publishedFrom: 2 })))
    text = await textOf(tx)
    throw new Undo()
  }).catch((error: unknown) => {
    if (!(error instanceof Undo)) throw error
  })
  const content = JSON.parse(text) as { content: { measured_g: { id: string; value: number; note: string }[] }; counts: { levels: number } }
  expect(canonicalJson(content as unknown as Json)).toBe(text)
  const values = new Set(content.content.measured_g.map(({ value }) => value))
  expect(seed.filter((value) => !values.has(value === 0 ? 0 : value))).toEqual([])
  expect(content.counts.levels).toBe(407)
})
