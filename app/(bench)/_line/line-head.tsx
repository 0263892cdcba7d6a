'use client'
import Link from 'next/link'
import type { ReactNode } from 'react'
import type { Level } from '@/openapi/schemas/level'
import type { TransitionDetail } from '@/openapi/schemas/transition'
import { Configuration } from '@/app/_components/configuration'
import { useEdition } from '@/app/_components/data/edition'
import { Follow } from '@/app/_components/follow'
import { nm } from '@/app/_components/line-columns'
import { levelPage, speciesPage, speciesText } from '@/app/_components/names'
import { PageHead } from '@/app/_components/page-head'
import { Quantity } from '@/app/_components/quantity'
import { TermSymbol } from '@/app/_components/term-symbol'

/** Five decimals in the optical; far in the infrared the table's figures end sooner. */
const shown = (nanometres: number): { decimals: number } | { digits: number } => (nanometres < 30_000 ? { decimals: 5 } : { digits: 8 })

/** The line by its species and conventional wavelength, both levels, and its place on every scale. */
export function LineHead({ line }: { line: TransitionDetail }) {
  const { href } = useEdition()
  const { lower, upper } = line
  return (
    <>
      <PageHead
        crumbs={
          <>
            <Link className="link" href={href(speciesPage(lower.species))}>{speciesText(lower.species)}</Link>
            <span aria-hidden="true">·</span>
            <span>{line.verdict.allowed ? 'line' : 'pair of levels'} <code>{line.id}</code></span>
          </>
        }
        title={
          <>
            {speciesText(lower.species)} <span className="num">{nm(line.wavelength_conventional_nm)}</span>&#8239;nm
            <span className="ml-2 text-[0.6em] text-muted">in {line.conventional_medium === 'air' ? 'air' : 'vacuum'}</span>
          </>
        }
        aside={<Follow subject={line.id} />}
      >
        <span className="inline-flex flex-wrap items-baseline gap-x-3">
          <LevelLink level={lower} href={href} />
          <span aria-hidden="true">–</span>
          <LevelLink level={upper} href={href} />
        </span>
      </PageHead>
      <dl className="mb-6 grid grid-cols-2 gap-px overflow-hidden border border-rule bg-rule sm:grid-cols-3 xl:grid-cols-6">
        <Fact name="In air">{line.wavelength_air_nm === null ? <span className="text-muted">does not apply</span> : <Quantity value={line.wavelength_air_nm} {...shown(line.wavelength_air_nm)} unit="nm" />}</Fact>
        <Fact name="In vacuum"><Quantity value={line.wavelength_vac_nm} {...shown(line.wavelength_vac_nm)} unit="nm" /></Fact>
        <Fact name="Wavenumber"><Quantity value={line.wavenumber_invcm} unc={line.wavenumber_unc_invcm} decimals={4} unit="cm⁻¹" /></Fact>
        <Fact name="Frequency"><Quantity value={line.frequency_thz} decimals={6} unit="THz" /></Fact>
        <Fact name="Effective g">
          <Quantity value={line.g_eff} decimals={5} absent={line.g_eff_status === 'not_applicable' ? 'not_applicable' : 'unknown'} />
        </Fact>
        <Fact name="Kind and pattern">
          {line.kind}
          {line.pattern ? `, ${line.pattern}` : ''}
          {line.verdict.intercombination ? <span className="block text-xs text-warn">intercombination</span> : null}
          {line.verdict.allowed ? null : <span className="block text-xs text-bad">forbidden</span>}
        </Fact>
      </dl>
    </>
  )
}

function LevelLink({ level, href }: { level: Level; href: (path: string) => string }) {
  return (
    <Link className="link inline-flex items-baseline gap-x-1.5 text-ink!" href={href(levelPage(level.id))}>
      <Configuration text={level.configuration} /> <TermSymbol term={level.term} />
    </Link>
  )
}

function Fact({ name, children }: { name: string; children: ReactNode }) {
  return (
    <div className="bg-sheet px-3.5 py-2.5">
      <dt className="note">{name}</dt>
      <dd className="num text-base">{children}</dd>
    </div>
  )
}
