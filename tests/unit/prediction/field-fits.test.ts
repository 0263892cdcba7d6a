import { EventEmitter } from 'node:events'
import { describe, expect, it } from 'vitest'
import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { type HeavyJob, heavyChunks } from '@/lib/prediction/bulk/heavy'
import { type FromWorker, Pool, type ToWorker, type WorkerLike } from '@/lib/prediction/bulk/pool'
import { serveJobs } from '@/lib/prediction/bulk/worker-side'
import { fieldFitAnswer } from '@/lib/prediction/field-fits/answer'
import { FieldFitRequest } from '@/openapi/operations/field-fits'
import { edition, SODIUM_LEVELS } from './edition'

const snapshot = edition(SODIUM_LEVELS)
const ZERO = 2e6
const SINGLET = { lower: { energy_invcm: 0, s: 0, l: 0, j: 0, parity: 'even' }, upper: { energy_invcm: ZERO, s: 0, l: 1, j: 1, parity: 'odd' } }

/** The triplet of a singlet line at a field, g = 1. */
const peaks = (fieldTesla: number) => [-1, 0, 1].map((q) => ({ q, position: ZERO + q * MU_B_OVER_HC_INVCM_PER_T * fieldTesla, position_unc: 0.01 }))
const named = (fieldTesla: number) => peaks(fieldTesla).map(({ q, ...one }) => ({ ...one, m_lower: 0, m_upper: q }))

async function fitted(body: object) {
  const warnings: string[] = []
  const { data } = await fieldFitAnswer(snapshot, FieldFitRequest.parse({ lines: [SINGLET], unit: 'cm-1', model: 'linear', ...body }), (code) => warnings.push(code))
  return { data, warnings }
}

/** The worker's code in this thread; what passes between is cloned as between threads. */
class NearWorker extends EventEmitter implements WorkerLike {
  private readonly inside = new EventEmitter()

  constructor() {
    super()
    const line = {
      postMessage: (message: FromWorker) => void setImmediate(() => this.emit('message', structuredClone(message))),
      on: (_event: 'message', listener: (message: ToWorker) => void) => this.inside.on('message', listener),
    }
    serveJobs(line, (job) => heavyChunks(job as HeavyJob))
  }

  postMessage(message: ToWorker): void {
    const cloned = structuredClone(message)
    setImmediate(() => this.inside.emit('message', cloned))
  }

  terminate(): void {
    this.removeAllListeners()
  }

  unref(): void {
    // nothing holds this process
  }
}

describe('a long fit', () => {
  /** A fit of so many peaks of D2, each named, with what it asks of the pool. */
  async function asked(count: number, more: object = {}) {
    const components = [[0.5, 1.5, 1], [-0.5, -1.5, -1], [0.5, -0.5, -5 / 3], [-0.5, 0.5, 5 / 3]] as const
    const measurements = Array.from({ length: count }, (_, i) => {
      const [lower, upper, shift] = components[i % 4] ?? components[0]
      return { position: 16973.36619 + shift * MU_B_OVER_HC_INVCM_PER_T * 2 + 1e-3 * Math.sin(i), position_unc: 1e-3, m_lower: lower, m_upper: upper }
    })
    const body = FieldFitRequest.parse({ lines: [{ transition: 'Na-I.1~Na-I.3' }], unit: 'cm-1', measurements, ...more })
    const pool = new Pool({ spawn: () => new NearWorker(), workers: 1 })
    const { data } = await fieldFitAnswer(snapshot, body, () => undefined, { pool: () => pool, caller: 'a', signal: new AbortController().signal })
    return { data, here: (await fieldFitAnswer(snapshot, body, () => undefined)).data, pool }
  }

  it('is made in a worker, with the same answer to the last digit', async () => {
    const { data, here, pool } = await asked(60)
    expect(data).toMatchObject({ status: 'determined', field_tesla: expect.closeTo(2, 2) as number })
    expect(data).toEqual(here)
    expect(pool.counts.slices).toBeGreaterThan(0)
    // its place in the worker is free again
    expect(pool.load).toEqual({ active: 0, waiting: 0 })
  })

  it('leaves a short one, and one of g, to the thread that answers', async () => {
    expect((await asked(8)).pool.counts.slices).toBe(0)
    expect((await asked(60, { unknown: 'g', field: 2 })).pool.counts.slices).toBe(0)
  })
})

describe('a line given in a fit', () => {
  it('is told everything that is wrong with its levels and their terms at once', async () => {
    const lower = { ...SINGLET.lower, j: 2 }
    const refused: unknown = await fitted({ lines: [{ lower, upper: SINGLET.upper, lower_others: [{ ...lower, s: 1, l: 1 }], upper_others: [{ ...SINGLET.upper, parity: 'even' }] }], measurements: peaks(2) }).catch((error: unknown) => error)
    expect((refused as { errors: { pointer: string; code: string }[] }).errors.map(({ pointer, code }) => `${pointer} ${code}`).sort()).toEqual([
      '/lines/0/lower/j term_impossible', '/lines/0/lower_others/0/j term_mixed', '/lines/0/lower_others/0/l term_mixed', '/lines/0/lower_others/0/s term_mixed',
      '/lines/0/upper_others/0/j term_mixed', '/lines/0/upper_others/0/parity term_mixed',
    ])
  })
})

describe('a field fitted', () => {
  it('is told up to the largest that is computed', async () => {
    const { data } = await fitted({ measurements: named(9999) })
    expect(data).toMatchObject({ status: 'determined', field_tesla: expect.closeTo(9999, 3) as number })
  })

  it.each([['named', named(12_840)], ['of known q', peaks(12_840)]])('beyond it is undetermined, with the reason: peaks %s', async (_, measurements) => {
    const { data } = await fitted({ measurements })
    expect(data.status).toBe('undetermined')
    expect('reasons' in data ? data.reasons.map((reason) => reason.code) : []).toEqual([measurements[0] && 'm_lower' in measurements[0] ? 'field_too_large' : 'no_reading'])
  })
})

describe('peaks of a polarisation that is not seen', () => {
  const group = peaks(2).map(({ q, ...one }) => ({ ...one, group: q }))
  it.each([
    ['pi by its m along the field', { theta_deg: 0, measurements: named(2) }],
    ['the pi group against the field', { theta_deg: 180, measurements: group }],
    ['q = 0 beside visible_q without it', { visible_q: [-1, 1], measurements: peaks(2) }],
    ['pi where g is fitted', { theta_deg: 0, unknown: 'g', field: 2, measurements: named(2) }],
  ])('are told: %s', async (_, body) => {
    expect((await fitted(body)).warnings).toContain('polarisation_not_seen')
  })

  it('are not told where all may be seen', async () => {
    for (const body of [{ theta_deg: 90, measurements: named(2) }, { measurements: named(2) }, { theta_deg: 0, measurements: named(2).filter((one) => one.m_upper !== 0) }, { theta_deg: 0, measurements: peaks(2).filter(({ q }) => q !== 0).map((one) => ({ ...one, q: 'sigma' })) }]) {
      expect((await fitted(body)).warnings).not.toContain('polarisation_not_seen')
    }
  })
})
