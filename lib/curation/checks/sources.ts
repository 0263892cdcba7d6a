import { quoted } from '@/lib/units/number'
import type { ChangeInput, Checked } from '../rows'
import { Findings } from '../values'
import type { Union, Work } from './work'

/** Every source named, with the field that names it. Read from what was given, so that it is said even while the rest cannot be read. */
function named(change: ChangeInput): [field: string, key: string][] {
  const given = change.given as Record<string, unknown>
  const list: [string, string][] = []
  const add = (field: string, value: unknown) => typeof value === 'string' && value.trim() !== '' && list.push([field, value.trim()])
  for (const field of ['energy_source', 'g_source', 'ionisation_source', 'source']) add(field, given[field])
  if (Array.isArray(given.measured_g)) given.measured_g.forEach((one: unknown, at) => typeof one === 'object' && one !== null && add(`measured_g.${at}.source`, (one as Record<string, unknown>).source))
  return list
}

function addUnknown(findings: Findings, change: ChangeInput, sources: ReadonlySet<string>): void {
  if (change.kind === 'source' || change.action === 'retire') return
  for (const [field, key] of named(change)) {
    if (!sources.has(key)) findings.error('source_unknown', field, `There is no source ${quoted(key)} in the edition or in this amendment: mend the key, or add the source first.`)
  }
}

/** What a change is found to be once other sources are there than when it was checked: nothing else of it depends on them. */
export function recheckSources(change: ChangeInput, before: Checked, sources: ReadonlySet<string>): Checked {
  const findings = new Findings()
  findings.list.push(...before.findings.filter(({ code }) => code !== 'source_unknown'))
  addUnknown(findings, change, sources)
  return { row: before.row, findings: findings.list }
}

export const checkSources = (union: Union, work: Work): void => addUnknown(work.findings, work.change, union.sources)
