import { RecordBatchReader } from 'apache-arrow'
import { createHash } from 'node:crypto'
import { describe, expect, it } from 'vitest'
import { ask, faultsOf, type Json } from './helpers/client'

const table = async (body: Record<string, unknown>): Promise<Json> => {
  const reply = await ask('post', '/field-tables', { body })
  expect(reply.status, reply.text.slice(0, 500)).toBe(200)
  return reply.json
}

/** Cubic Hermite interpolation, as the description of the operation has it: what a client without this code writes. */
function evaluate(data: Json, field: number): { positions: number[]; strengths: number[] | null } {
  const nodes = data.nodes_tesla as number[]
  const next = Math.min(Math.max(1, nodes.findIndex((node) => node > field)), nodes.length - 1)
  const at = (field >= (nodes.at(-1) ?? 0) ? nodes.length - 1 : next) - 1
  const h = (nodes[at + 1] ?? 0) - (nodes[at] ?? 0)
  const t = (field - (nodes[at] ?? 0)) / h
  const read = (values: number[][], slopes: number[][]) =>
    (values[at] ?? []).map((v, c) => v + ((values[at + 1]?.[c] ?? 0) - v) * t * t * (3 - 2 * t) + h * t * (1 - t) * ((1 - t) * (slopes[at]?.[c] ?? 0) - t * (slopes[at + 1]?.[c] ?? 0)))
  return { positions: read(data.positions_invcm, data.position_slopes_invcm_per_tesla), strengths: data.strengths === null ? null : read(data.strengths, data.strength_slopes_per_tesla) }
}

/** Fields inside an interval that fall on no node: multiples of the golden ratio are spread evenly and fit nowhere. */
const fieldsWithin = (start: number, stop: number, count: number) => Array.from({ length: count }, (_, i) => start + (stop - start) * ((0.5 + i * 0.618_033_988_749_895) % 1))

const term = (base: number, l: number, js: number[], parity: string) => js.map((j) => ({ energy_invcm: base + 0.1 * j, s: 2, l, j, parity }))
const NARROW = { lower: term(0, 2, [0, 1, 2, 3, 4], 'even'), upper: term(20_000, 3, [1, 2, 3, 4, 5], 'odd') }

describe('an offline field table', () => {
  it.each([
    ['intermediate', 0, 5, 1e-6, 1e-6],
    ['intermediate', 30, 60, 1e-3, 1e-4],
    ['linear', 0, 5, 1e-6, 1e-6],
  ])('%s, %d to %d T: read anywhere, it errs by no more than it says', async (model, start, stop, max_error_invcm, max_strength_error) => {
    const multiplet = { transition: 'Na-I.1~Na-I.3' }
    const { data, meta } = await table({ multiplet, field: { start, stop, unit: 'T' }, model, max_error_invcm, max_strength_error })
    expect(data.max_error_invcm).toBeLessThanOrEqual(max_error_invcm)
    expect(data.max_strength_error).toBeLessThanOrEqual(max_strength_error * 1.001)
    expect([data.proved, data.nodes_tesla[0], data.nodes_tesla.at(-1)]).toEqual([true, start, stop])
    expect(meta).toMatchObject({ edition: 1, model, conventions: { checksum: expect.stringContaining('SHA-256') } })
    const values = fieldsWithin(start, stop, 200)
    const reply = await ask('post', '/predictions', { body: { multiplets: [multiplet], field: { values, unit: 'T' }, model } })
    const [block] = reply.json.data
    expect([data.q, data.m_lower, data.m_upper, data.j_lower, data.j_upper]).toEqual([block.q, block.m_lower, block.m_upper, block.j_lower, block.j_upper])
    values.forEach((field, f) => {
      const { positions, strengths } = evaluate(data, field)
      positions.forEach((position, c) => expect(Math.abs(position - block.values[f][c])).toBeLessThanOrEqual(data.max_error_invcm))
      strengths?.forEach((strength, c) => expect(Math.abs(strength - (model === 'linear' ? block.strengths[c] : block.strengths[f][c]))).toBeLessThanOrEqual(data.max_strength_error))
    })
  })

  it('has the checksum it says it has, and the same numbers in Arrow', async () => {
    const body = { multiplet: { transition: 'Na-I.1~Na-I.3' }, field: { start: 0, stop: 20, unit: 'kG' }, max_error_invcm: 1e-4, max_strength_error: 1e-3 }
    const { data } = await table(body)
    const hash = createHash('sha256')
    const matrices = [data.positions_invcm, data.position_slopes_invcm_per_tesla, data.strengths, data.strength_slopes_per_tesla] as number[][][]
    for (const numbers of [data.q, data.m_lower, data.m_upper, data.nodes_tesla, ...matrices.map((matrix) => matrix.flat())] as number[][]) hash.update(Buffer.from(Float64Array.from(numbers).buffer))
    expect(hash.digest('hex')).toBe(data.checksum_sha256)
    const arrow = await ask('post', '/field-tables?format=arrow', { body })
    const [batch] = [...RecordBatchReader.from(arrow.bytes)]
    expect(batch?.numRows).toBe(data.nodes_tesla.length)
    expect(batch?.schema.metadata.get('checksum_sha256')).toBe(data.checksum_sha256)
    expect(JSON.parse(batch?.schema.metadata.get('j_upper') ?? '')).toEqual(data.j_upper)
    for (const name of ['positions_invcm', 'position_slopes_invcm_per_tesla', 'strengths', 'strength_slopes_per_tesla']) {
      expect(Array.from({ length: batch?.numRows ?? 0 }, (_, row) => [...(batch?.getChild(name)?.get(row) as Iterable<number>)])).toStrictEqual(data[name])
    }
  })

  it('is made of inline levels too, and without strengths where the terms have no amplitude between them', async () => {
    const level = (energy_invcm: number, s: number, l: number, j: number, parity: string) => ({ energy_invcm, s, l, j, parity })
    const multiplet = { lower: [level(0, 0, 0, 0, 'even')], upper: [level(37_645, 1, 1, 0, 'odd'), level(39_412, 1, 1, 1, 'odd'), level(44_043, 1, 1, 2, 'odd')] }
    const { data } = await table({ multiplet, field: { start: 0, stop: 10, unit: 'T' } })
    expect(data).toMatchObject({ transition: null, strengths: null, strength_slopes_per_tesla: null, max_strength_error: null, proved: true })
  })

  it.each([
    [{ multiplet: { transition: 'Na-I.1~Na-I.3' }, field: { start: 2, stop: 2, unit: 'T' } }, 400, ['/field/stop field_interval']],
    [{ multiplet: { transition: 'Na-I.1~Na-I.999' }, field: { start: 2, stop: 20_000, unit: 'T' } }, 400, ['/field/stop field_too_large', '/multiplet/transition level_unknown']],
    [{ multiplet: { lower: [{ energy_invcm: 0, s: 0.5, l: 0, j: 0.5, parity: 'even' }], upper: [{ energy_invcm: 9, s: 0.5, l: 1, j: 0.5, parity: 'odd' }] }, field: { start: 0, stop: 1, unit: 'T' } }, 422, ['/multiplet term_incomplete']],
    // the terms are narrow, so that they mix at once, and the strengths of all their components are wanted to ten digits
    [{ multiplet: NARROW, field: { start: 0, stop: 1000, unit: 'T' }, max_error_invcm: 2e-10, max_strength_error: 1e-10 }, 413, ['/max_error_invcm table_too_large']],
    [{ multiplet: NARROW, field: { start: 0, stop: 1, unit: 'T' }, max_error_invcm: 1e-10 }, 422, ['/max_error_invcm error_below_rounding']],
  ])('%j is refused: %d %j', async (body, status, faults) => {
    const reply = await ask('post', '/field-tables', { body })
    expect([reply.status, faultsOf(reply)]).toEqual([status, faults])
  })
})
