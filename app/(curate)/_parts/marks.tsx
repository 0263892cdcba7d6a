import { CircleAlert, CircleCheck, CircleDot, CirclePause, CircleSlash, Eye, PencilLine, TriangleAlert } from 'lucide-react'
import type { AmendmentState } from '@/openapi/schemas/amendment'
import type { Finding } from '@/openapi/schemas/change'
import { trueMinus } from '@/lib/units/print'
import { plural } from '../../_components/number'

/** What the checks say, set for reading: true minus signs and raised powers. */
export const detailText = (text: string): string => trueMinus(text.replace(/cm\^-1/g, 'cm⁻¹'))

const STATE: Record<AmendmentState, { word: string; icon: typeof Eye; tint: string }> = {
  draft: { word: 'Draft', icon: PencilLine, tint: 'text-ink' },
  in_review: { word: 'In review', icon: Eye, tint: 'text-sigma-plus' },
  accepted: { word: 'Accepted', icon: CircleCheck, tint: 'text-good' },
  published: { word: 'Published', icon: CircleDot, tint: 'text-muted' },
  withdrawn: { word: 'Withdrawn', icon: CircleSlash, tint: 'text-muted' },
}
export const STATES = Object.keys(STATE) as AmendmentState[]
export const stateWord = (state: AmendmentState): string => STATE[state].word

/** Where an amendment stands, in a word with a mark of its own; a returned draft says so. */
export function StateMark({ state, returned = false }: { state: AmendmentState; returned?: boolean }) {
  const { word, icon, tint } = returned && state === 'draft' ? { word: 'Returned', icon: CirclePause, tint: 'text-warn' } : STATE[state]
  const Icon = icon
  return (
    <span className={`inline-flex items-center gap-1.5 whitespace-nowrap font-medium ${tint}`}>
      <Icon size={15} aria-hidden="true" />
      {word}
    </span>
  )
}

export const Mark = ({ severity, size = 15 }: { severity: Finding['severity']; size?: number }) =>
  severity === 'error' ? <CircleAlert size={size} aria-hidden="true" className="shrink-0 text-bad" /> : <TriangleAlert size={size} aria-hidden="true" className="shrink-0 text-warn" />

/** "2 errors, 1 warning", or nothing. */
export const findingsText = (findings: readonly Pick<Finding, 'severity'>[]): string => {
  const errors = findings.filter((finding) => finding.severity === 'error').length
  const warnings = findings.length - errors
  return [errors > 0 ? plural(errors, 'error') : '', warnings > 0 ? plural(warnings, 'warning') : ''].filter((part) => part !== '').join(', ')
}

/** How many errors and warnings (or, of an amendment, how many `changes` have any), each with its mark; a tick where there are none. */
export function Tally({ errors, warnings, clear = 'no findings', changes = false }: { errors: number; warnings: number; clear?: string | null; changes?: boolean }) {
  if (errors === 0 && warnings === 0) return clear === null ? null : <span className="inline-flex items-center gap-1 whitespace-nowrap text-good"><CircleCheck size={15} aria-hidden="true" />{clear}</span>
  return (
    <span className="inline-flex flex-wrap items-center gap-x-3">
      {errors > 0 ? <span className="inline-flex items-center gap-1 whitespace-nowrap text-bad"><Mark severity="error" />{changes ? `${errors} with errors` : plural(errors, 'error')}</span> : null}
      {warnings > 0 ? <span className="inline-flex items-center gap-1 whitespace-nowrap text-warn"><Mark severity="warning" />{changes ? `${warnings} with warnings` : plural(warnings, 'warning')}</span> : null}
    </span>
  )
}

/** Findings in full, errors first. */
export function FindingsList({ findings, name }: { findings: readonly Finding[]; name?: (finding: Finding) => string | null }) {
  const sorted = [...findings].sort((a, b) => (a.severity === b.severity ? 0 : a.severity === 'error' ? -1 : 1))
  return (
    <ul className="space-y-1.5 text-sm">
      {sorted.map((finding, index) => (
        <li key={index} className="flex gap-2">
          <span className="mt-0.5"><Mark severity={finding.severity} /></span>
          <span className="min-w-0">
            <span className="sr-only">{finding.severity}: </span>
            {name?.(finding) ? <span className="mr-1.5 font-medium">{name(finding)}</span> : null}
            {detailText(finding.detail)}
          </span>
        </li>
      ))}
    </ul>
  )
}
