import type { Import, ImportColumn, ImportReading } from '@/openapi/schemas/import'

/** Which column of ours each header is; '' leaves it out. */
export type Mapped = Readonly<Record<string, string>>
export interface Reading { mapping: Mapped; defaults: Readonly<Record<string, string>>; encoding: string; delimiter: string; decimal: string }
export const AS_FOUND: Reading = { mapping: {}, defaults: {}, encoding: '', delimiter: '', decimal: '' }

export const DELIMITER_WORDS: Record<ImportReading['delimiter'], string> = { ',': 'comma', ';': 'semicolon', '\t': 'tab', '|': 'bar' }

/** What each header is read as now: what was chosen, else what was found, else what it looks like. */
export function choicesOf(reading: ImportReading, mapping: Mapped): Record<string, string> {
  return Object.fromEntries(reading.columns.map(({ header, field, suggestion }) => [header, mapping[header] ?? field ?? suggestion ?? '']))
}

/** Whether a person has to say what columns are: the file was refused for its header. */
export const wantsMapping = ({ state, problems }: Pick<Import, 'state' | 'problems'>): boolean => state === 'refused' && problems.some(({ code }) => /^(column|mapping)_/.test(code))

export interface MappingFaults { twice: ReadonlySet<string>; missing: string[] }

/** Headers that claim the same column, and columns that a row cannot do without. */
export function mappingFaults(choices: Readonly<Record<string, string>>, defaults: Readonly<Record<string, string>>, columns: readonly ImportColumn[]): MappingFaults {
  const claimed = new Map<string, string[]>()
  for (const [header, field] of Object.entries(choices)) if (field !== '') claimed.set(field, [...(claimed.get(field) ?? []), header])
  const has = (name: string): boolean => claimed.has(name) || (defaults[name] ?? '').trim() !== ''
  return {
    twice: new Set([...claimed.values()].filter((headers) => headers.length > 1).flat()),
    missing: has('id') ? [] : columns.filter(({ name, required }) => required && !has(name) && !(name === 'energy_invcm' && has('energy_literal'))).map(({ name }) => name),
  }
}

/** The parts of the upload that say how to read the file; what is found out from it is left out. */
export function uploadParts({ mapping, defaults, encoding, delimiter, decimal }: Reading): [string, string][] {
  const parts: [string, string][] = []
  const entries = Object.entries(mapping)
  if (entries.length > 0) parts.push(['mapping', JSON.stringify(Object.fromEntries(entries.map(([header, field]) => [header, field === '' ? null : field])))])
  const kept = Object.entries(defaults).filter(([, text]) => text.trim() !== '')
  if (kept.length > 0) parts.push(['defaults', JSON.stringify(Object.fromEntries(kept))])
  for (const [name, text] of [['encoding', encoding], ['delimiter', delimiter], ['decimal', decimal]] as const) if (text !== '') parts.push([name, text])
  return parts
}

/** How far it is, from 0 to 1; null where that is not known yet. */
export const progressOf = ({ rows_total: total, rows_done: done }: Pick<Import, 'rows_total' | 'rows_done'>): number | null => (total === 0 ? null : Math.min(1, done / total))

export function bytesText(bytes: number): string {
  if (bytes < 1024) return `${bytes} bytes`
  return bytes < 1024 * 1024 ? `${(bytes / 1024).toFixed(0)} kB` : `${(bytes / 1024 / 1024).toFixed(1)} MB`
}
