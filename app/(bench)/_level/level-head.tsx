'use client'
import Link from 'next/link'
import type { ReactNode } from 'react'
import { EV_PER_INVCM } from '@/lib/atomic/constants'
import type { Level, LevelDetail } from '@/openapi/schemas/level'
import { Configuration } from '@/app/_components/configuration'
import { useEdition } from '@/app/_components/data/edition'
import { Follow } from '@/app/_components/follow'
import { Evidence } from '@/app/_components/evidence'
import { speciesPage, speciesText } from '@/app/_components/names'
import { decimalsOf, halves } from '@/app/_components/number'
import { PageHead } from '@/app/_components/page-head'
import { Quantity } from '@/app/_components/quantity'
import { TermSymbol } from '@/app/_components/term-symbol'
import { decodedTerm } from './term-words'

/** The level by its name, what the name says in words, and its two chief values. */
export function LevelHead({ level }: { level: LevelDetail }) {
  const { href } = useEdition()
  return (
    <>
      <PageHead
        crumbs={
          <>
            <Link className="link" href={href(speciesPage(level.species))}>{speciesText(level.species)}</Link>
            <span aria-hidden="true">·</span>
            <span>level <code>{level.id}</code></span>
            {level.alternative_name ? <><span aria-hidden="true">·</span><span>Paschen name <b className="font-medium text-ink">{level.alternative_name}</b></span></> : null}
          </>
        }
        title={
          <span className="inline-flex flex-wrap items-baseline gap-x-3">
            <span>{speciesText(level.species)}</span>
            <Configuration text={level.configuration} />
            <TermSymbol term={level.term} />
          </span>
        }
        aside={<Follow subject={level.id} />}
      />
      <div className="grid gap-x-10 gap-y-6 lg:grid-cols-[minmax(0,1fr)_20rem]">
        <Decoded level={level} />
        <dl className="sheet grid content-start divide-y divide-rule self-start">
          <Fact name="Energy above the ground level">
            <Quantity value={level.energy_invcm} unc={level.energy_unc_invcm} decimals={decimalsOf(level.energy_invcm)} unit="cm⁻¹" className="text-xl" />
            <span className="note mt-0.5 flex flex-wrap items-baseline gap-x-2">
              <Quantity value={level.energy_invcm * EV_PER_INVCM} decimals={6} unit="eV" />
              <Evidence grade={level.energy_evidence} />
            </span>
          </Fact>
          <Fact name={<>Landé factor g<sub>J</sub>, adopted</>}>
            <Quantity value={level.g_j.adopted} unc={level.g_j.adopted_unc} decimals={level.g_j.basis === 'coupled' || level.g_j.adopted === null ? 6 : decimalsOf(level.g_j.adopted)} className="text-xl" absent={level.g_j.status === 'not_applicable' ? 'not_applicable' : 'unknown'} />
            <span className="note mt-0.5 block">{basisText(level)}</span>
          </Fact>
        </dl>
      </div>
    </>
  )
}

function basisText({ g_j: g, term }: Level): string {
  if (term.j === 0) return 'J = 0 has no g: the level does not split in first order'
  if (g.basis === 'coupled') return `computed in ${g.scheme === 'J1K' ? 'pair' : g.scheme} coupling${g.coupled_exact ? `; ${g.coupled_exact} at gₛ = 2` : ''}`
  if (g.basis === 'measured') return 'measured'
  return g.basis === 'chosen' ? 'chosen by a curator, with a reason' : 'neither measured nor given by the coupling'
}

function Fact({ name, children }: { name: ReactNode; children: ReactNode }) {
  return (
    <div className="px-4 py-3">
      <dt className="note">{name}</dt>
      <dd>{children}</dd>
    </div>
  )
}

/** The term symbol taken apart, each quantum number with what it means. */
function Decoded({ level }: { level: Level }) {
  const { sentence, parts } = decodedTerm(level)
  return (
    <section aria-label="The term in words">
      <p className="prose-text">{sentence}</p>
      <dl className="mt-4 grid grid-cols-[max-content_minmax(0,1fr)] border-t border-rule text-sm">
        {parts.map(({ symbol, value, meaning }) => (
          <div key={symbol} className="col-span-2 grid grid-cols-subgrid items-baseline gap-x-5 border-b border-rule py-1.5">
            <dt className="symbol min-w-20 text-lg">
              <i>{symbol}</i> = <span className="num">{typeof value === 'number' ? halves(value) : value}</span>
            </dt>
            <dd className="text-muted">{meaning}</dd>
          </div>
        ))}
      </dl>
    </section>
  )
}
