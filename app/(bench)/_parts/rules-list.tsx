import { Check, Minus, X } from 'lucide-react'
import type { Verdict } from '@/openapi/schemas/transition'
import { printDetail, RULE_NAMES } from './rule-words'

const LOOK = {
  pass: { icon: Check, word: 'met', tint: 'text-good' },
  fail: { icon: X, word: 'broken', tint: 'text-bad' },
  not_applicable: { icon: Minus, word: 'does not apply', tint: 'text-muted' },
} as const

const BASES = [
  { basis: 'rigorous', title: 'Rigorous', note: 'angular momentum and parity; no coupling assumed' },
  { basis: 'ls', title: 'In LS coupling', note: 'hold as far as S and L are good quantum numbers' },
] as const

/** Each selection rule alone, with its verdict and its reason. */
export function RulesList({ verdict }: { verdict: Verdict }) {
  return (
    <div className="grid gap-x-10 gap-y-5 md:grid-cols-2">
      {BASES.map(({ basis, title, note }) => (
        <div key={basis}>
          <h3 className="mb-0.5">{title}</h3>
          <p className="note mb-2">{note}</p>
          <ul className="border-t border-rule">
            {verdict.rules
              .filter((rule) => rule.basis === basis)
              .map((rule) => {
                const { icon: Icon, word, tint } = LOOK[rule.verdict]
                return (
                  <li key={rule.rule} className="grid grid-cols-[1.25rem_minmax(0,1fr)_auto] items-baseline gap-x-2 border-b border-rule py-1.5 text-sm">
                    <Icon size={15} aria-hidden="true" className={`translate-y-0.5 ${tint}`} />
                    <span>
                      <span className="font-medium">{RULE_NAMES[rule.rule]}</span>
                      <span className="block text-muted">{printDetail(rule.detail)}</span>
                    </span>
                    <span className={`text-xs ${tint}`}>{word}</span>
                  </li>
                )
              })}
          </ul>
        </div>
      ))}
    </div>
  )
}
