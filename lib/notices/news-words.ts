import type { FieldNews } from '@/lib/mail/edition-mail'
import type { ChangeKind } from '@/openapi/schemas/change'
import type { Change } from '@/openapi/schemas/edition'
import type { MeasuredG } from '@/openapi/schemas/level'

/** Parts that follow from others and say nothing of their own. */
const FOLLOWING: ReadonlySet<string> = new Set([
  'term.unicode', 'term.multiplicity', 'term.s', 'term.l', 'term.j', 'term.parity', 'term.degeneracy', 'term.k',
  'g_j.scheme', 'g_j.coupled', 'g_j.coupled_exact', 'g_j.ls', 'g_j.ls_exact', 'g_j.status', 'g_j.measured', 'g_j.measured_unc', 'g_j.measured_source', 'g_j.measured_evidence',
])

/** The names that people use for values, and their units; a value that is not listed goes by the name that the API gives it. */
const WORDS: Readonly<Record<string, readonly [name: string, unit?: string]>> = {
  energy_invcm: ['energy', ' cm^-1'], energy_unc_invcm: ['uncertainty of the energy', ' cm^-1'], energy_literal: ['digits of the source'], energy_source: ['source of the energy'],
  energy_evidence: ['evidence of the energy'], 'term.symbol': ['term'], 'term.label': ['label of the term'], 'term.core': ['core'], 'term.l_outer': ['l of the outer electron'], 'term.j_outer': ['j of the outer electron'],
  'g_j.adopted': ['g_J adopted'], 'g_j.adopted_unc': ['uncertainty of g_J adopted'], 'g_j.basis': ['basis of g_J adopted'], 'g_j.chosen_reason': ['reason of the chosen g_J'], 'g_j.all_measured': ['g_J measured'],
  reason: ['reason of the retirement'], ionisation_energy_invcm: ['ionisation energy', ' cm^-1'], ionisation_source: ['source of the ionisation energy'], ionisation_evidence: ['evidence of the ionisation energy'],
  mass_u: ['mass', ' u'], nuclear_spin: ['nuclear spin'], abundance_percent: ['abundance', ' %'], g_i: ['g_I'],
  a_mhz: ['A', ' MHz'], a_unc_mhz: ['uncertainty of A', ' MHz'], b_mhz: ['B', ' MHz'], b_unc_mhz: ['uncertainty of B', ' MHz'],
}

const isMeasured = (value: unknown): value is MeasuredG => typeof value === 'object' && value !== null && 'value' in value && 'source' in value
const measuredText = ({ value, unc, source, evidence, note }: MeasuredG): string => `${value}${unc === null ? '' : ` +- ${unc}`} [${source}, ${evidence}]${note === null ? '' : ` (${note})`}`

/** Numbers with every stored digit. */
function textOf(value: unknown, unit = ''): string {
  if (value === null || value === undefined) return unit === '' ? 'none' : 'not known'
  if (Array.isArray(value)) return value.length === 0 ? 'none' : value.map((one: unknown) => (isMeasured(one) ? measuredText(one) : JSON.stringify(one))).join(', ')
  if (typeof value === 'boolean') return value ? 'yes' : 'no'
  return typeof value === 'object' ? JSON.stringify(value) : `${String(value)}${unit}`
}

/** Things that belong to a level or a species say which of them they are. */
function ownerOf(kind: ChangeKind, subject: string): string {
  const mass = subject.slice(subject.indexOf('/') + 1)
  return kind === 'isotope' ? `isotope ${mass}` : kind === 'hyperfine' ? `hyperfine constants of isotope ${mass}` : ''
}

/** Every value that a change changes, old and new, in words. What is new has nothing to be compared with. */
export function fieldNews({ kind, subject, action, fields }: Change): FieldNews[] {
  const owner = ownerOf(kind, subject)
  const under = owner === '' ? '' : `${owner}${action === 'created' ? ' (new)' : ''}, `
  if (owner !== '' && (action === 'retired' || action === 'absent')) return [{ name: owner, before: null, after: 'gone' }]
  return fields.flatMap(({ field, before, after }): FieldNews[] => {
    if (FOLLOWING.has(field)) return []
    const [name, unit] = WORDS[field] ?? [field.replaceAll('_', ' ')]
    const [old, now] = [textOf(before, unit), textOf(after, unit)]
    return old === now ? [] : [{ name: `${under}${name}`, before: action === 'created' ? null : old, after: now }]
  })
}
