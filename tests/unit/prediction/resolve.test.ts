import { describe, expect, it } from 'vitest'
import { Problem } from '@/lib/problem'
import { levelIndex, sourceOf, speciesIndex } from '@/lib/prediction/resolve'
import { edition, level, SODIUM_LEVELS } from './edition'

const refusal = (task: () => unknown): Problem => {
  try {
    task()
  } catch (error) {
    if (error instanceof Problem) return error
    throw error
  }
  throw new Error('nothing was refused')
}

const retired = level({ ordinal: 4, configuration: '4s', energyInvcm: 25739.999, status: 'retired', retiredReason: 'it was a line of neon', successor: 'Na-I.2', publishedFrom: 2, revision: 2 })
const snapshot = edition([...SODIUM_LEVELS, retired], { edition: 3 })

describe('a retired level', () => {
  it('is 410 with its reason, its successor, and the edition that still holds it', () => {
    const problem = refusal(() => levelIndex(snapshot, 'Na-I.4'))
    expect([problem.status, problem.code]).toEqual([410, 'level_retired'])
    expect(problem.detail).toBe('Na-I.4 was retired in edition 2: it was a line of neon. Its successor is Na-I.2. Edition 1 still holds it.')
    expect(problem.extra).toEqual({ reason: 'it was a line of neon', successor: 'Na-I.2', retired_in_edition: 2 })
  })

  it('is not among the active ones', () => {
    expect(snapshot.size).toBe(3)
    expect(snapshot.indexOf('Na-I.4')).toBeUndefined()
  })
})

describe('what is not there', () => {
  it('is 404 and names what is near', () => {
    expect(refusal(() => levelIndex(snapshot, 'Na-I.9'))).toMatchObject({ status: 404, code: 'level_unknown', detail: 'Edition 3 holds no level Na-I.9. Did you mean Na-I.3 or Na-I.2?' })
    expect(refusal(() => speciesIndex(snapshot, 'Na-II')).detail).toContain('Did you mean Na-I?')
    expect(refusal(() => levelIndex(snapshot, 'K-I.1')).detail).toContain('no species K-I either')
    expect(refusal(() => sourceOf(snapshot, 'mode')).detail).toContain('Did you mean made?')
  })
})
