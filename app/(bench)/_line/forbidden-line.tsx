'use client'
import Link from 'next/link'
import type { Route } from 'next'
import type { TransitionDetail } from '@/openapi/schemas/transition'
import { useEdition } from '@/app/_components/data/edition'
import { linePage } from '@/app/_components/names'
import { Notice } from '@/app/_components/notice'
import { Part } from '@/app/_components/page-head'
import { printDetail, RULE_NAMES } from '../_parts/rule-words'
import { RulesList } from '../_parts/rules-list'

const WORDS = { E1: 'electric dipole', M1: 'magnetic dipole', E2: 'electric quadrupole' } as const

/** A pair of levels that no line of this kind joins: which rule forbids it, and what else may be asked. */
export function ForbiddenLine({ line }: { line: TransitionDetail }) {
  const { href } = useEdition()
  const broken = line.verdict.rules.filter((rule) => rule.basis === 'rigorous' && rule.verdict === 'fail')
  const others = (Object.keys(WORDS) as (keyof typeof WORDS)[]).filter((kind) => kind !== line.kind)
  return (
    <>
      <Notice tone="bad" title={`No ${WORDS[line.kind]} (${line.kind}) line joins these levels.`}>
        {broken.map((rule) => (
          <p key={rule.rule}>
            {RULE_NAMES[rule.rule]}: {printDetail(rule.detail)}
          </p>
        ))}
        <p>
          Judge the pair as{' '}
          {others.map((kind, index) => (
            <span key={kind}>
              {index > 0 ? ' or ' : ''}
              <Link className="link" href={href(`${linePage(line.id)}?kind=${kind}`) as Route}>{WORDS[kind]} ({kind})</Link>
            </span>
          ))}
          .
        </p>
      </Notice>
      <Part title="Selection rules">
        <RulesList verdict={line.verdict} />
      </Part>
    </>
  )
}
