import type { ModelAsked } from '@/app/_components/field/use-model'

/** The model in force, and who chose it. */
export const modelWords = (inForce: 'linear' | 'intermediate', asked: ModelAsked): string =>
  `${inForce === 'linear' ? 'linear (weak field)' : 'intermediate (diagonalised within the term)'}${asked === 'auto' ? ', chosen by auto' : ''}`
