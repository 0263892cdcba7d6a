import type { RuleName } from '@/openapi/schemas/transition'

/** The rules by the names the trade gives them. */
export const RULE_NAMES: Record<RuleName, string> = {
  parity: 'Parity',
  delta_j: 'Change of J',
  zero_zero: 'J = 0 to J = 0',
  delta_s: 'Change of S',
  delta_l: 'Change of L',
  l_zero_zero: 'L = 0 to L = 0',
  delta_m: 'Change of m',
  m_zero_zero: 'm = 0 to m = 0',
  zero_amplitude: 'Vanishing amplitude',
}

/** A rule's reason as the API gives it in ASCII, set with arrows, Δ and true signs. */
export const printDetail = (detail: string): string =>
  detail
    .replace(/->/g, '→')
    .replace(/\bDelta /g, 'Δ')
    .replace(/\+-/g, '±')
    .replace(/(^|[\s=(])-(?=\d)/g, '$1−')
