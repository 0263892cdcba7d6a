import { tableFromIPC } from 'apache-arrow'
import { type Format, predictArrays, predictBlocks } from '../typescript'
import { type Check, componentsOf, type Inquiry, NothingToCheck } from './inquiry'

/** Rows of comma-separated text (RFC 4180). */
function csvRows(text: string): string[][] {
  const rows: string[][] = [[]]
  for (const [, quoted, plain, end] of text.matchAll(/(?:"((?:[^"]|"")*)"|([^",\r\n]*))(,|\r?\n|$)/g)) {
    rows.at(-1)?.push(quoted?.replaceAll('""', '"') ?? plain ?? '')
    if (end === ',') continue
    if (end === '') break
    rows.push([])
  }
  return rows.filter((row) => row.length > 1 || row[0] !== '')
}

type Rows = Record<string, unknown>[]
const named = ([head, ...rows]: string[][]): Rows => rows.map((row) => Object.fromEntries((head ?? []).map((name, i) => [name, row[i] === '' ? null : Number(row[i])])))

const READERS: Record<Exclude<Format, 'json'>, (bytes: Uint8Array) => Rows> = {
  csv: (bytes) => named(csvRows(new TextDecoder().decode(bytes))),
  ecsv: (bytes) => named(csvRows(new TextDecoder().decode(bytes).split('\n').filter((line) => !line.startsWith('#')).join('\n'))),
  ndjson: (bytes) => new TextDecoder().decode(bytes).trim().split('\n').map((line) => JSON.parse(line) as Record<string, unknown>).filter((row) => !('complete' in row)),
  arrow: (bytes) => tableFromIPC(bytes).toArray().map((row: { toJSON: () => Record<string, unknown> }) => row.toJSON()),
}

/** Numbers that every table of components has. */
const NUMBERS = ['m_lower', 'm_upper', 'q', 'shift_invcm', 'shift_ghz', 'wavenumber_invcm', 'wavelength_vac_nm', 'frequency_thz', 'strength', 'intensity'] as const

const formats: Check = {
  name: 'formats',
  claim: 'Every format of an answer carries the same numbers, to the last bit.',
  async run(the) {
    for (const line of the.lines) {
      const options = { field: the.random.magnitude(1e-3, 10), model: 'linear' } as const
      const parameters = { transition: line.id, kind: line.kind, ...options }
      const json = await componentsOf(the, line, options)
      if (json === null) continue
      for (const [format, read] of Object.entries(READERS) as [Exclude<Format, 'json'>, (bytes: Uint8Array) => Rows][]) {
        const answer = await the.table.ask('getComponents', parameters, undefined, { format })
        the.note('getComponents', { ...parameters, format } as never)
        const rows = read(new Uint8Array(await answer.arrayBuffer()))
        the.claim(rows.length === json.components.length, () => `${rows.length} rows in ${format}, ${json.components.length} in JSON`)
        for (const [i, component] of json.components.entries()) {
          const other = NUMBERS.find((name) => (rows[i]?.[name] ?? null) !== component[name])
          the.claim(other === undefined, () => `${other ?? ''} is ${String(rows[i]?.[other ?? ''])} in ${format}, ${String(component[other ?? 'q'])} in JSON`)
        }
      }
    }
  },
}

const same = (a: number | null | undefined, b: number | undefined): boolean => (a === null ? Number.isNaN(b) : a === b)

/** How many of [field][component] differ from [component][field]. */
function differing(rows: readonly (readonly (number | null)[])[], columns: readonly Float64Array[] | null): number {
  return rows.reduce((sum, row, f) => sum + row.filter((value, c) => !same(value, columns?.[c]?.[f])).length, 0)
}

const bulkFormats: Check = {
  name: 'formats in bulk',
  claim: 'Bulk predictions are the same in JSON, NDJSON and Arrow, to the last bit.',
  async run(the: Inquiry) {
    the.needs('post /predictions')
    const lines = the.lines.filter((line) => line.kind === 'E1').map(({ id }) => ({ transition: id }))
    if (lines.length === 0) throw new NothingToCheck('no line drawn is E1')
    const body = { lines, field: { values: Array.from({ length: 5 }, () => the.random.magnitude(1e-3, 20)), unit: 'T' as const }, derivatives: true }
    const { data } = await the.table.post('predict', body)
    the.note('predict', {}, body)
    let at = 0
    for await (const block of predictBlocks(the.table, body)) {
      the.claim(JSON.stringify(block) === JSON.stringify(data[at]), () => `block ${at} differs in NDJSON`)
      at += 1
    }
    the.claim(at === lines.length, () => `${at} blocks in NDJSON, ${lines.length} asked`)
    at = 0
    for await (const block of predictArrays(the.table, body)) {
      const json = data[at]
      the.claim(json !== undefined && differing(json.values, block.values) === 0 && differing(json.derivatives ?? [], block.derivatives) === 0, () => `positions or derivatives of block ${at} differ in Arrow`)
      const strengths = (json?.strengths ?? null) as (number | number[])[] | null
      const rows = strengths === null ? [] : typeof strengths[0] === 'number' ? body.field.values.map(() => strengths as number[]) : (strengths as number[][])
      the.claim((strengths === null) === (block.strengths === null) && differing(rows, block.strengths) === 0, () => `strengths of block ${at} differ in Arrow`)
      at += 1
    }
    the.claim(at === lines.length, () => `${at} blocks in Arrow, ${lines.length} asked`)
  },
}

export const FORMAT_CHECKS: Check[] = [formats, bulkFormats]
