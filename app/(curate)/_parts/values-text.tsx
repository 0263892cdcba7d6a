import type { AmendmentChange, FieldDifference } from '@/openapi/schemas/change'
import { Configuration } from '../../_components/configuration'
import { TermSymbol } from '../../_components/term-symbol'
import { fieldWords, cellText } from '../_sheet/columns'
import { isRecord } from '../_sheet/change-state'

/** `z5P*2` -> its label and its symbol. */
export const splitTerm = (text: string): { symbol: string; label: string | null } => {
  const named = /^([a-z])\s*(?=\d+[A-Z])(.*)$/.exec(text)
  return named ? { label: named[1] ?? null, symbol: named[2] ?? text } : { symbol: text, label: null }
}

/** A measured g_J with all that was said of it, on one line. */
function measuredText(item: Record<string, unknown>): string {
  const value = cellText(item.literal ?? item.value)
  const rest = [item.unc === null || item.unc === undefined || item.unc === '' ? '' : `± ${cellText(item.unc)}`, cellText(item.source), cellText(item.evidence), cellText(item.note)]
  return [value, ...rest].filter((part) => part !== '').join(', ')
}

/** One value of a change, set as the trade prints it. */
export function ValueText({ field, value }: { field: string; value: unknown }) {
  if (value === null || value === undefined || value === '' || (Array.isArray(value) && value.length === 0)) return <span className="text-muted">nothing</span>
  if (typeof value === 'boolean') return value ? 'yes' : 'no'
  if (Array.isArray(value)) return <span className="block">{value.map((item: unknown, index) => <span key={index} className="block">{isRecord(item) ? measuredText(item) : cellText(item)}</span>)}</span>
  const text = cellText(value)
  if (field === 'configuration' || field === 'core_configuration') return <Configuration text={text} />
  if (field === 'term' || field === 'core') return <TermSymbol term={splitTerm(text)} />
  return <span className="num [overflow-wrap:anywhere]">{text}</span>
}

/** What a change alters: as the server read it, or as it was typed where it cannot be read. */
export function differencesOf(change: AmendmentChange): FieldDifference[] {
  if (change.after !== null || change.action === 'retire') return change.fields
  const [before, typed] = [{ ...change.before } as Record<string, unknown>, { ...change.values } as Record<string, unknown>]
  return [...new Set([...Object.keys(typed), ...Object.keys(before)])]
    .filter((field) => cellText(before[field]) !== cellText(typed[field]) && !(field === 'energy_invcm' && isBlank(typed[field])) && !(isBlank(before[field]) && isBlank(typed[field])))
    .map((field) => ({ field, before: before[field] ?? null, after: typed[field] ?? null }))
}
const isBlank = (value: unknown): boolean => value === null || value === undefined || value === '' || value === false || (Array.isArray(value) && value.length === 0)

/** Values before and after, only those that differ. Of something new (`fresh`) there is nothing to compare with. */
export function Differences({ fields, caption, fresh = false }: { fields: readonly FieldDifference[]; caption: string; fresh?: boolean }) {
  if (fields.length === 0) return <p className="note">Nothing differs from the newest edition.</p>
  return (
    <div className="scroll-x" tabIndex={0} role="region" aria-label={`${caption}, scrolls sideways`}>
      <table className="ruled min-w-0!">
        <caption className="sr-only">{caption}</caption>
        <thead><tr><th scope="col">Value</th>{fresh ? null : <th scope="col">Before</th>}<th scope="col">{fresh ? 'New' : 'After'}</th></tr></thead>
        <tbody>
          {fields.map(({ field, before, after }) => (
            <tr key={field}>
              <th scope="row" className="text-muted">{fieldWords(field)}</th>
              {fresh ? null : <td className="whitespace-normal! text-muted"><del className="no-underline"><ValueText field={field} value={before} /></del></td>}
              <td className="whitespace-normal!"><ins className="no-underline"><ValueText field={field} value={after} /></ins></td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}
