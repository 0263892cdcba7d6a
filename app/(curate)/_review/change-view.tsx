'use client'
import Link from 'next/link'
import type { AmendmentChange } from '@/openapi/schemas/change'
import { levelPage } from '../../_components/names'
import { FindingsList, Tally } from '../_parts/marks'
import { Differences, differencesOf, ValueText } from '../_parts/values-text'
import { isRecord } from '../_sheet/change-state'
import { fieldWords } from '../_sheet/columns'
import { Threads } from './comment-threads'
import type { Thread } from './threads'

const KIND: Record<AmendmentChange['kind'], string> = { level: 'level', source: 'source', species: 'species', isotope: 'isotope', hyperfine: 'hyperfine constants' }
const ACTION = { create: 'new', replace: 'corrected', retire: 'retired' } as const

/** The level in its symbols, as it will be (or was, where it is retired). */
function Symbols({ change }: { change: AmendmentChange }) {
  const values: unknown = change.after ?? change.before ?? change.values
  if (change.kind !== 'level' || !isRecord(values)) return null
  return (
    <span className="inline-flex flex-wrap items-baseline gap-x-2">
      <ValueText field="configuration" value={values.configuration} />
      <ValueText field="term" value={values.term} />
    </span>
  )
}

/** One change for a reviewer: values before and after, what was found, what was said. */
export function ChangeView({ amendment, change, threads }: { amendment: string; change: AmendmentChange; threads: readonly Thread[] }) {
  const errors = change.findings.filter((finding) => finding.severity === 'error').length
  return (
    <li className="break-inside-avoid border-b border-rule py-4" id={`change-${change.id}`}>
      <div className="flex flex-wrap items-baseline gap-x-4 gap-y-1">
        <h3 className="flex flex-wrap items-baseline gap-x-3">
          {change.kind === 'level' && change.action !== 'create' ? <Link className="link font-mono text-base" href={levelPage(change.subject)}>{change.subject}</Link> : <span className="font-mono text-base">{change.subject}</span>}
          <Symbols change={change} />
        </h3>
        <span className="text-sm font-medium">{`${change.kind === 'level' && change.action === 'create' ? 'new' : ACTION[change.action]} ${KIND[change.kind]}`}</span>
        <span className="note">by {change.author.name}{change.import_row === null ? '' : `, line ${change.import_row} of the imported file`}</span>
        <span className="ml-auto text-sm"><Tally errors={errors} warnings={change.findings.length - errors} clear={null} /></span>
      </div>
      <div className="mt-2 grid gap-x-8 gap-y-3 lg:grid-cols-[minmax(0,3fr)_minmax(0,2fr)]">
        <div className="min-w-0">
          {change.action === 'retire' ? (
            <dl className="facts text-sm">
              <dt>Reason</dt><dd>{change.reason}</dd>
              <dt>Successor</dt><dd>{change.successor ? <Link className="link" href={levelPage(change.successor)}>{change.successor}</Link> : 'none'}</dd>
            </dl>
          ) : <Differences fields={differencesOf(change)} fresh={change.action === 'create'} caption={`What changes in ${change.subject}`} />}
        </div>
        <div className="min-w-0 space-y-3">
          {change.findings.length > 0 ? <FindingsList findings={change.findings} name={(finding) => (finding.field === null ? null : fieldWords(finding.field))} /> : null}
          {change.comment ? <p className="border-l-2 border-rule-strong pl-3 text-sm"><span className="note block">{change.author.name} on the warnings</span>{change.comment}</p> : null}
          <Threads amendment={amendment} change={change.id} threads={threads} about={change.subject} />
        </div>
      </div>
    </li>
  )
}
