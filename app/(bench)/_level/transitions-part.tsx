'use client'
import { keepPreviousData, useQuery } from '@tanstack/react-query'
import Link from 'next/link'
import { useState } from 'react'
import type { Level, LevelDetail } from '@/openapi/schemas/level'
import type { Transition } from '@/openapi/schemas/transition'
import { apiQuery } from '@/app/_components/data/api'
import { useEdition } from '@/app/_components/data/edition'
import { Configuration } from '@/app/_components/configuration'
import { DataTable, type Column } from '@/app/_components/data-table'
import { EmptyState } from '@/app/_components/empty-state'
import { levelPage, linePage } from '@/app/_components/names'
import { fixed, plural } from '@/app/_components/number'
import { Part } from '@/app/_components/page-head'
import { ProblemView } from '@/app/_components/problem-view'
import { TableSkeleton } from '@/app/_components/skeleton'
import { TermSymbol } from '@/app/_components/term-symbol'
import { Choices } from '@/app/_components/plots/plot-frame'
import { Warnings } from '@/app/_components/warnings'
import { printDetail, RULE_NAMES } from '../_parts/rule-words'

type Shown = 'allowed' | 'forbidden'
type Judged = 'E1' | 'M1' | 'E2' | 'any'

const JUDGED: { value: Judged; label: string }[] = [
  { value: 'E1', label: 'E1' },
  { value: 'M1', label: 'M1' },
  { value: 'E2', label: 'E2' },
  { value: 'any', label: 'by parity' },
]

const ASIDE: Record<Judged, string> = {
  E1: 'Electric dipole: parity must change',
  M1: 'Magnetic dipole: parity must stay the same',
  E2: 'Electric quadrupole: parity must stay the same, J may change by two',
  any: 'E1 where the parities differ, else M1, else E2',
}

const partnerOf = (line: Transition, id: string): Level => (line.lower.id === id ? line.upper : line.lower)

/** The rules that a pair breaks, and for a line that is allowed the LS rules that it goes against. */
const broken = (line: Transition) => line.verdict.rules.filter((rule) => rule.verdict === 'fail')
const reasons = (line: Transition): string => broken(line).map((rule) => `${RULE_NAMES[rule.rule]}: ${printDetail(rule.detail)}`).join('; ')

function columnsFor(id: string, shown: Shown, href: (path: string) => string): Column<Transition>[] {
  return [
    {
      name: 'wavelength_conventional_nm',
      header: 'Wavelength, nm',
      align: 'right',
      rowHeader: true,
      sort: true,
      value: (line) => line.wavelength_conventional_nm,
      cell: (line) => (
        <Link className="link inline-flex min-h-6 items-center" href={href(`${linePage(line.id)}${shown === 'forbidden' ? `?kind=${line.kind}` : ''}`)} prefetch={false}>
          {fixed(line.wavelength_conventional_nm, 4)}
          <span className="ml-1 inline-block w-[1.6em] text-left text-xs text-muted">{line.conventional_medium === 'vacuum' ? 'vac' : 'air'}</span>
        </Link>
      ),
    },
    { name: 'line', header: 'Line', value: (line) => line.id, only: 'copy' },
    { name: 'direction', header: 'Partner is', value: (line) => (line.lower.id === id ? 'upper' : 'lower') },
    {
      name: 'partner',
      header: 'Partner',
      value: (line) => partnerOf(line, id).id,
      cell: (line) => {
        const partner = partnerOf(line, id)
        return (
          <Link className="link inline-flex min-h-6 items-baseline gap-x-1.5" href={href(levelPage(partner.id))} prefetch={false}>
            <Configuration text={partner.configuration} /> <TermSymbol term={partner.term} />
          </Link>
        )
      },
    },
    { name: 'kind', header: shown === 'allowed' ? 'Kind' : 'Judged as', value: (line) => line.kind, sort: true },
    ...(shown === 'allowed'
      ? [
          { name: 'g_eff', header: <>g<sub>eff</sub></>, align: 'right', sort: true, value: (line: Transition) => line.g_eff, cell: (line: Transition) => (line.g_eff === null ? <span className="text-muted">{line.g_eff_status === 'not_applicable' ? 'does not apply' : 'not known'}</span> : fixed(line.g_eff, 5)) } satisfies Column<Transition>,
          { name: 'pattern', header: 'Pattern', value: (line: Transition) => line.pattern } satisfies Column<Transition>,
          {
            name: 'remark',
            header: 'Remark',
            wrap: true,
            value: reasons,
            cell: (line: Transition) => (line.verdict.intercombination ? <span className="text-warn">intercombination</span> : <span className="text-muted">{line.verdict.ls === false ? 'breaks an LS rule' : ''}</span>),
          } satisfies Column<Transition>,
        ]
      : [{ name: 'broken_rules', header: 'Why not', wrap: true, value: reasons, cell: (line: Transition) => <Reasons line={line} /> } satisfies Column<Transition>]),
  ]
}

function Reasons({ line }: { line: Transition }) {
  return (
    <ul className="space-y-0.5">
      {broken(line)
        .filter((rule) => rule.basis === 'rigorous')
        .map((rule) => (
          <li key={rule.rule}>
            <span className="text-bad">{RULE_NAMES[rule.rule]}</span> <span className="text-muted">{printDetail(rule.detail)}</span>
          </li>
        ))}
    </ul>
  )
}

/** The lines that leave or reach this level, and the pairs that make none, with the rules they break. */
export function TransitionsPart({ level }: { level: LevelDetail }) {
  const { param: edition, href } = useEdition()
  const [shown, setShown] = useState<Shown>('allowed')
  const [judged, setJudged] = useState<Judged>('E1')
  const query = { include: 'forbidden', kind: judged === 'any' ? undefined : judged, limit: 1000, edition }
  const { data, error, refetch } = useQuery({ ...apiQuery<Transition[]>(`/levels/${level.id}/transitions`, query), placeholderData: keepPreviousData })
  if (error) return <Part title="Transitions"><ProblemView error={error} onRetry={() => void refetch()} heading="h3" /></Part>
  if (!data) return <Part title="Transitions"><TableSkeleton rows={6} columns={5} label="Loading the transitions" /></Part>
  const groups = { allowed: data.data.filter((line) => line.verdict.allowed), forbidden: data.data.filter((line) => !line.verdict.allowed) }
  const rows = groups[shown]
  return (
    <Part title="Transitions" aside={ASIDE[judged]}>
      <Warnings meta={data.meta} />
      <div className="mb-3 flex flex-wrap items-center gap-x-6 gap-y-2">
      <div role="group" aria-label="Which pairs" className="flex flex-wrap gap-1.5">
        {(['allowed', 'forbidden'] as const).map((one) => (
          <button key={one} type="button" aria-pressed={shown === one} onClick={() => setShown(one)} className="btn btn-small aria-pressed:border-lamp aria-pressed:bg-lamp-wash">
            {one === 'allowed' ? 'Allowed' : 'Forbidden'} <span className="num text-muted">{groups[one].length}</span>
          </button>
        ))}
      </div>
      <Choices label="Judged as" value={judged} choices={JUDGED} onChange={setJudged} />
      </div>
      <DataTable
        key={`${shown} ${judged}`}
        columns={columnsFor(level.id, shown, href)}
        rows={rows}
        rowKey={(line) => `${line.id} ${line.kind}`}
        caption={`${shown === 'allowed' ? 'Allowed' : 'Forbidden'} transitions of ${level.id}`}
        hideCaption
        summary={shown === 'allowed' ? `${plural(rows.length, 'line')}, by the rigorous rules; intercombination lines are marked` : `${plural(rows.length, 'pair')} that make no line of the kind judged, each with the rule it breaks`}
        initialSort={{ name: 'wavelength_conventional_nm', descending: false }}
        empty={<EmptyState title={shown === 'allowed' ? 'No level of this edition makes a line with this one' : 'Every other level makes a line with this one'} />}
      />
    </Part>
  )
}
