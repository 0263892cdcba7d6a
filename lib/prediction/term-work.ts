import type { TermLevels } from '@/lib/atomic/mixing'
import type { Kind } from '@/lib/atomic/rules'
import type { BlockGiven } from '@/lib/prediction/bulk/block'
import { componentCount } from '@/lib/prediction/bulk/places'
import { type Fault, Problem } from '@/lib/problem'
import { GIVEN_COMPONENTS_MOST } from '@/openapi/operations/inline'

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

/** Components of one multiplet that is given level by level: twice those of the largest that atoms have. */
export const GIVEN_MULTIPLET_MOST = 8000

/** What is wrong with a multiplet given inline that is larger than any atom's: each of its lines alone would take long to be judged. Null where nothing is. */
export function givenMultipletFault(block: BlockGiven, code: 'answer_too_large' | 'table_too_large', pointer: string): Fault | null {
  if (block.form !== 'multiplet' || block.transition !== null) return null
  const components = componentCount(block)
  if (components <= GIVEN_MULTIPLET_MOST) return null
  return { pointer, code, detail: `The multiplet given inline has ${components} components; one may have up to ${GIVEN_MULTIPLET_MOST}. Give terms of fewer levels.` }
}
