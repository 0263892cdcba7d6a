import { describe, expect, it } from 'vitest'
import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
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
