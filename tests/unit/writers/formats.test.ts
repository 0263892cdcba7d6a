import { tableFromIPC } from 'apache-arrow'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { writeTable } from '@/lib/http/writers'
import type { Column, Table } from '@/openapi/core/table'

const columns: Column[] = [
  { name: 'id', type: 'text', unit: null, description: 'Level' },
  { name: 'energy_invcm', type: 'number', unit: 'cm-1', description: 'Energy above the ground level' },
  { name: 'q', type: 'integer', unit: null, description: 'm_upper - m_lower' },
  { name: 'checked', type: 'boolean', unit: null, description: 'Checked: "yes" or no' },
]
const rows = [
  ['Na-I.1', 0, -1, true],
  ['a, "b"', 16956.17025, 0, false],
  [null, null, null, null],
]
const table = (given: unknown[][] = rows): Table => ({ name: 'levels', columns, rows: given as readonly unknown[][] })
const meta = { edition: 1, warnings: [] }

const bytesOf = async (body: string | Uint8Array<ArrayBuffer> | ReadableStream<Uint8Array>): Promise<Uint8Array> =>
  body instanceof ReadableStream ? new Uint8Array(await new Response(body).arrayBuffer()) : typeof body === 'string' ? new TextEncoder().encode(body) : body

/** The 64 bits of a double. */
const bits = (value: number): bigint => new BigUint64Array(Float64Array.of(value).buffer)[0] ?? 0n

describe('NDJSON', () => {
  it('puts one row on a line and closes with the meta, so that a cut stream shows', () => {
    const { body, contentType } = writeTable('ndjson', table(), meta)
    expect(contentType).toBe('application/x-ndjson; charset=utf-8')
    const lines = (body as string).split('\n')
    expect(lines.pop()).toBe('')
    expect(lines.map((line) => JSON.parse(line) as unknown)).toEqual([
      { id: 'Na-I.1', energy_invcm: 0, q: -1, checked: true },
      { id: 'a, "b"', energy_invcm: 16956.17025, q: 0, checked: false },
      { id: null, energy_invcm: null, q: null, checked: null },
      { meta, complete: true },
    ])
  })

  it('writes the objects that the table brings', () => {
    const { body } = writeTable('ndjson', { ...table(), items: [{ deep: { a: 1 } }] }, meta)
    expect((body as string).split('\n')[0]).toBe('{"deep":{"a":1}}')
  })
})

describe('JSON written row by row', () => {
  it('is the envelope', () => {
    const { body } = writeTable('json', table([['x', 1.5, 2, true]]), meta, { limit: 1, next_cursor: null })
    expect(JSON.parse(body as string)).toEqual({ data: [{ id: 'x', energy_invcm: 1.5, q: 2, checked: true }], meta, page: { limit: 1, next_cursor: null } })
  })

  it('is an empty list where there are no rows', () => {
    expect(JSON.parse(writeTable('json', table([]), meta).body as string)).toEqual({ data: [], meta })
  })
})

describe('ECSV', () => {
  it('has a YAML header with names, units, types and descriptions', () => {
    const { body } = writeTable('ecsv', table(), meta)
    expect(body).toBe(
      [
        '# %ECSV 1.0',
        '# ---',
        "# delimiter: ','",
        '# datatype:',
        '# - {name: "id", datatype: string, description: "Level"}',
        '# - {name: "energy_invcm", unit: "cm-1", datatype: float64, description: "Energy above the ground level"}',
        '# - {name: "q", datatype: int64, description: "m_upper - m_lower"}',
        '# - {name: "checked", datatype: bool, description: "Checked: \\"yes\\" or no"}',
        '# meta: {"table":"levels","answer":{"edition":1,"warnings":[]}}',
        '# schema: astropy-2.0',
        'id,energy_invcm,q,checked',
        'Na-I.1,0,-1,True',
        '"a, ""b""",16956.17025,0,False',
        '"","","",""',
        '',
      ].join('\n'),
    )
  })
})

describe('Arrow', () => {
  it('carries units in the field metadata, the meta in the schema, and nulls as nulls', async () => {
    const { body, contentType } = writeTable('arrow', table(), meta)
    expect(contentType).toBe('application/vnd.apache.arrow.stream')
    const read = tableFromIPC(await bytesOf(body))
    expect(read.schema.fields.map((field) => [field.name, String(field.type), field.metadata.get('unit')])).toEqual([
      ['id', 'Utf8', undefined],
      ['energy_invcm', 'Float64', 'cm-1'],
      ['q', 'Int32', undefined],
      ['checked', 'Bool', undefined],
    ])
    expect(JSON.parse(read.schema.metadata.get('meta') ?? '')).toEqual(meta)
    expect(read.toArray().map((row: { toJSON(): unknown }) => row.toJSON())).toEqual([
      { id: 'Na-I.1', energy_invcm: 0, q: -1, checked: true },
      { id: 'a, "b"', energy_invcm: 16956.17025, q: 0, checked: false },
      { id: null, energy_invcm: null, q: null, checked: null },
    ])
  })

  it('keeps doubles bit for bit over several batches, streamed', async () => {
    const values = Array.from({ length: 60_000 }, (_, i) => Math.sqrt(i) * (i % 2 === 0 ? 1 : -1e-7))
    const { body } = writeTable('arrow', { name: 't', columns: [columns[1] as Column], rows: values.map((value) => [value]) }, meta)
    expect(body).toBeInstanceOf(ReadableStream)
    const read = tableFromIPC(await bytesOf(body))
    expect(read.batches.length).toBeGreaterThan(10)
    const back = Array.from(read.getChild('energy_invcm') as Iterable<number>)
    expect(back.length).toBe(values.length)
    expect(back.every((value, i) => bits(value) === bits(values[i] ?? Number.NaN))).toBe(true)
  })

  it('reads back an empty table with its columns', async () => {
    const read = tableFromIPC(await bytesOf(writeTable('arrow', table([]), meta).body))
    expect(read.numRows).toBe(0)
    expect(read.schema.fields).toHaveLength(4)
  })

  it('gives back any finite double', async () => {
    await fc.assert(
      fc.asyncProperty(fc.array(fc.double({ noNaN: true, noDefaultInfinity: true }), { minLength: 1, maxLength: 20 }), async (values) => {
        const read = tableFromIPC(await bytesOf(writeTable('arrow', { name: 't', columns: [columns[1] as Column], rows: values.map((value) => [value]) }, {}).body))
        expect(Array.from(read.getChild('energy_invcm') as Iterable<number>).map(bits)).toEqual(values.map(bits))
      }),
      { numRuns: 50 },
    )
  })
})

describe('long answers', () => {
  it('are read one piece at a time: rows are not made before they are asked for', async () => {
    let made = 0
    const endless: Table = {
      name: 't',
      columns: [columns[0] as Column],
      rows: {
        *[Symbol.iterator]() {
          for (;;) {
            made += 1
            yield ['x'.repeat(1000)]
          }
        },
      },
    }
    const { body } = writeTable('csv', endless, meta)
    expect(body).toBeInstanceOf(ReadableStream)
    const reader = (body as ReadableStream<Uint8Array>).getReader()
    await reader.read()
    const before = made
    await reader.read()
    await reader.cancel()
    expect(made - before).toBeLessThan(200)
    expect(before).toBeLessThan(1000)
  })
})
