'use client'
import Link from 'next/link'
import { memo } from 'react'
import type { Level } from '@/openapi/schemas/level'
import type { TransitionDetail } from '@/openapi/schemas/transition'
import { fieldForUrl } from '@/lib/units/field'
import { Configuration } from '@/app/_components/configuration'
import { useEdition } from '@/app/_components/data/edition'
import { Evidence, EvidenceKey } from '@/app/_components/evidence'
import { useAngle, useField } from '@/app/_components/field/use-field'
import { useModel, useNucleus, useQuadratic } from '@/app/_components/field/use-model'
import { levelPage } from '@/app/_components/names'
import { Part } from '@/app/_components/page-head'
import { Quantity } from '@/app/_components/quantity'
import { RequestPanel } from '@/app/_components/request-panel'
import { SourceRef } from '@/app/_components/source-ref'
import { TermSymbol } from '@/app/_components/term-symbol'
import { RulesList } from '../_parts/rules-list'
import { decimalsOf } from '@/app/_components/number'

/** What stands below a line's bench: rules, moments, where both levels come from, the request. */
export const LineFoot = memo(function LineFoot({ line, kind }: { line: TransitionDetail; kind: string | null }) {
  return (
    <>
      {line.verdict.allowed ? (
        <>
          <Part title="Selection rules" aside={line.verdict.intercombination ? 'An intercombination line: real, and weaker than one that keeps S' : undefined}>
            <RulesList verdict={line.verdict} />
          </Part>
          <Moments line={line} />
        </>
      ) : null}
      <Part title="Where both levels come from">
        <div className="grid gap-x-10 gap-y-6 md:grid-cols-2">
          <Origin level={line.lower} end="Lower" />
          <Origin level={line.upper} end="Upper" />
        </div>
        <div className="mt-5"><EvidenceKey /></div>
      </Part>
      <Request line={line} kind={kind} />
    </>
  )
})

/** Alone, so that a drag of the field redraws no more of the foot than this. */
function Request({ line, kind }: { line: TransitionDetail; kind: string | null }) {
  const { field } = useField()
  const { thetaDeg } = useAngle()
  const [model] = useModel()
  const [quadratic] = useQuadratic()
  const [nucleus] = useNucleus()
  if (!line.verdict.allowed) return <RequestPanel path={`/transitions/${line.id}`} query={{ kind }} />
  const what = nucleus.on ? { hyperfine: 'true', isotope: nucleus.isotope } : { model, diamagnetic: quadratic ? 'true' : null }
  return <RequestPanel path={`/transitions/${line.id}/components`} query={{ field: fieldForUrl(field.tesla, field.unit), theta_deg: thetaDeg, kind, ...what }} />
}

const PATTERN = {
  unsplit: 'Unsplit: at g_s = 2 every shift is 0.',
  normal: 'Normal: shifts of −1, 0 and +1 Lorentz units.',
  triplet: 'Triplet: three distinct shifts, not those of the normal effect.',
  anomalous: 'Anomalous: neither unsplit nor a triplet.',
} as const

/** The effective Landé factor and the moments of the pattern, in Lorentz units. */
function Moments({ line }: { line: TransitionDetail }) {
  const { pi_second: pi, sigma_first: first, sigma_second: second } = line.moments_lorentz
  const absent = line.g_eff_status === 'not_applicable' ? 'not_applicable' : 'unknown'
  return (
    <Part title="Moments of the pattern" aside="In Lorentz units, about the line’s centre, weighted with strength">
      <dl className="facts max-w-[46rem]">
        <dt>Effective Landé factor</dt>
        <dd><Quantity value={line.g_eff} digits={8} absent={absent} /> <span className="note">the centre of gravity of σ+</span></dd>
        <dt>Mean shift of σ+</dt>
        <dd><Quantity value={first} digits={8} absent={absent} unit="L" /></dd>
        <dt>Mean square shift of σ+</dt>
        <dd><Quantity value={second} digits={8} absent={absent} unit="L²" /></dd>
        <dt>Mean square shift of π</dt>
        <dd><Quantity value={pi} digits={8} absent={absent} unit="L²" /></dd>
        <dt>Pattern</dt>
        <dd>{line.pattern === null ? <span className="text-muted">not known</span> : PATTERN[line.pattern].replace('g_s', 'gₛ')}</dd>
      </dl>
    </Part>
  )
}

/** One level's values, each with its own source and how far it was checked. */
function Origin({ level, end }: { level: Level; end: string }) {
  const { href } = useEdition()
  const g = level.g_j
  return (
    <div className="min-w-0">
      <h3 className="mb-2 flex flex-wrap items-baseline gap-x-2">
        <span className="text-muted">{end}</span>
        <Link className="link inline-flex items-baseline gap-x-1.5" href={href(levelPage(level.id))}><Configuration text={level.configuration} /> <TermSymbol term={level.term} /></Link>
        <code className="text-xs text-muted">{level.id}</code>
      </h3>
      <dl className="facts text-sm">
        <dt>Energy</dt>
        <dd>
          <Quantity value={level.energy_invcm} unc={level.energy_unc_invcm} decimals={decimalsOf(level.energy_invcm)} unit="cm⁻¹" />{' '}
          <SourceRef source={level.energy_source} evidence={level.energy_evidence} />
          <span className="note block">{level.line_checked ? 'A well-known wavelength is reproduced to 0.01 nm with it.' : 'No well-known wavelength checks it yet.'}</span>
        </dd>
        <dt>g<sub>J</sub> adopted</dt>
        <dd>
          <Quantity value={g.adopted} unc={g.adopted_unc} digits={8} absent={g.status === 'not_applicable' ? 'not_applicable' : 'unknown'} />{' '}
          {g.basis === 'coupled' && g.coupled_exact ? <span className="note">{g.coupled_exact} in {g.scheme} coupling at g<sub>s</sub> = 2 <Evidence grade="computed" /></span> : null}
        </dd>
        {g.measured !== null ? (
          <>
            <dt>g<sub>J</sub> measured</dt>
            <dd>
              <Quantity value={g.measured} unc={g.measured_unc} digits={8} /> <SourceRef source={g.measured_source} evidence={g.measured_evidence} />
            </dd>
          </>
        ) : null}
      </dl>
      {level.note ? <p className="note mt-1">{level.note}</p> : null}
    </div>
  )
}
