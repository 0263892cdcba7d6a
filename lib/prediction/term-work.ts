import type { TermLevels } from '@/lib/atomic/mixing'
import type { Kind } from '@/lib/atomic/rules'
import { componentCount } from '@/lib/prediction/bulk/places'
import { Problem } from '@/lib/problem'

/** Components of the multiplets that one request may bring with it: about a second of work, since validity alone diagonalises each at many fields. */
export const GIVEN_COMPONENTS_MOST = 30_000

/** Two terms whose levels stand in a request. */
export interface GivenTerms {
  kind: Kind
  lower: Pick<TermLevels, 'levels'>
  upper: Pick<TermLevels, 'levels'>
}

/**
 * Refuses terms given in a request that would take too long, or too much memory, to be made ready: those of the table are as large as atoms make
 * them, these as large as someone writes them. Lines of one multiplet count once.
 */
export function boundGivenTerms(given: readonly GivenTerms[], code: 'answer_too_large' | 'fit_too_large'): void {
  const counts = new Map<string, number>()
  for (const { kind, lower, upper } of given) {
    const key = JSON.stringify([kind, lower.levels, upper.levels])
    if (!counts.has(key)) counts.set(key, componentCount({ form: 'multiplet', transition: null, kind, lower: { twoS: 0, l: 0, ...lower }, upper: { twoS: 0, l: 0, ...upper } }))
  }
  const components = [...counts.values()].reduce((sum, count) => sum + count, 0)
  if (components <= GIVEN_COMPONENTS_MOST) return
  throw new Problem(code, `The terms given in the request have ${components} components between them; those of one request may have up to ${GIVEN_COMPONENTS_MOST}. Give fewer lines, or terms of fewer levels.`, { extra: { limit: GIVEN_COMPONENTS_MOST } })
}
