import type { HyperfineComponent } from '@/openapi/schemas/components'

/** What tells a component with nuclear spin from all others: its isotope and the high-field names of both ends, which every state has. */
export const nuclearKey = ({ mass_number, m_j_lower, m_i_lower, m_j_upper, m_i_upper }: HyperfineComponent): string => `${mass_number} ${m_j_lower} ${m_i_lower} ${m_j_upper} ${m_i_upper}`
