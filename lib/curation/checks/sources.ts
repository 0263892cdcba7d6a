import { quoted } from '@/lib/units/number'
import type { Union, Work } from './work'

/** Every source named, with the field that names it. Read from what was given, so that it is said even while the rest cannot be read. */
function named(work: Work): [field: string, key: string][] {
  const given = work.change.given as Record<string, unknown>
  const list: [string, string][] = []
  const add = (field: string, value: unknown) => typeof value === 'string' && value.trim() !== '' && list.push([field, value.trim()])
  for (const field of ['energy_source', 'g_source', 'ionisation_source', 'source']) add(field, given[field])
  if (Array.isArray(given.measured_g)) given.measured_g.forEach((one: unknown, at) => typeof one === 'object' && one !== null && add(`measured_g.${at}.source`, (one as Record<string, unknown>).source))
  return list
}


export function checkSources(union: Union, work: Work): void {
  if (work.change.kind === 'source' || work.change.action === 'retire') return
  for (const [field, key] of named(work)) {
    if (!union.sources.has(key)) work.findings.error('source_unknown', field, `There is no source ${quoted(key)} in the edition or in this amendment: mend the key, or add the source first.`)
  }
}
