'use client'
import type { HyperfineConstants, LevelDetail } from '@/openapi/schemas/level'
import { fieldForUrl } from '@/lib/units/field'
import { useField } from '@/app/_components/field/use-field'
import { useModel, useNucleus, useQuadratic } from '@/app/_components/field/use-model'
import { Configuration } from '@/app/_components/configuration'
import { DataTable, type Column } from '@/app/_components/data-table'
import { EvidenceKey } from '@/app/_components/evidence'
import { Part } from '@/app/_components/page-head'
import { Quantity } from '@/app/_components/quantity'
import { RequestPanel } from '@/app/_components/request-panel'
import { SourceRef } from '@/app/_components/source-ref'
import { CitedSource } from '../_parts/cited-source'

const hyperfine: Column<HyperfineConstants>[] = [
  { name: 'mass_number', header: 'Isotope', rowHeader: true, value: (row) => row.mass_number },
  { name: 'a_mhz', header: 'A, MHz', align: 'right', value: (row) => row.a_mhz, cell: (row) => <Quantity value={row.a_mhz} unc={row.a_unc_mhz} digits={9} /> },
  { name: 'a_unc_mhz', header: 'Uncertainty of A', value: (row) => row.a_unc_mhz, only: 'copy' },
  { name: 'b_mhz', header: 'B, MHz', align: 'right', value: (row) => row.b_mhz, cell: (row) => <Quantity value={row.b_mhz} unc={row.b_unc_mhz} digits={9} /> },
  { name: 'b_unc_mhz', header: 'Uncertainty of B', value: (row) => row.b_unc_mhz, only: 'copy' },
  { name: 'source', header: 'Source', value: (row) => row.source, cell: (row) => <SourceRef source={row.source} evidence={row.evidence} /> },
  { name: 'note', header: 'Note', wrap: true, value: (row) => row.note, cell: (row) => row.note ?? '' },
]

/** Where each value of the level comes from, its hyperfine constants, and the request. */
export function LevelFoot({ level }: { level: LevelDetail }) {
  const g = level.g_j
  return (
    <>
      {level.hyperfine_constants.length > 0 ? (
        <Part title="Hyperfine constants" aside="A: magnetic dipole, B: electric quadrupole">
          <DataTable columns={hyperfine} rows={level.hyperfine_constants} rowKey={(row) => String(row.mass_number)} caption={`Hyperfine constants of ${level.id}`} hideCaption />
        </Part>
      ) : null}
      <Part title="Where each value comes from" aside={`Revision ${level.revision}`}>
        <dl className="facts">
          <dt>Energy</dt>
          <dd>
            <CitedSource source={level.energy_source} evidence={level.energy_evidence} />
            <span className="note block">
              {level.energy_literal === null ? 'The digits of the source were not kept.' : <>The source prints <span className="num text-ink">{level.energy_literal}</span>.</>}{' '}
              {level.energy_unc_invcm === null ? (level.energy_invcm === 0 ? 'The ground level is the zero of the scale.' : 'No uncertainty is stated.') : null}{' '}
              {level.line_checked ? 'A well-known wavelength is reproduced to 0.01 nm with this level.' : 'No well-known wavelength checks this level yet.'}
            </span>
          </dd>
          <dt>Configuration</dt>
          <dd><Configuration text={level.configuration} /> <code className="text-xs text-muted">{level.configuration}</code></dd>
          {g.measured !== null ? (
            <>
              <dt>g<sub>J</sub> measured</dt>
              <dd><Quantity value={g.measured} unc={g.measured_unc} digits={9} /> <CitedSource source={g.measured_source} evidence={g.measured_evidence} /></dd>
            </>
          ) : null}
          {level.note ? (
            <>
              <dt>Note</dt>
              <dd>{level.note}</dd>
            </>
          ) : null}
        </dl>
        <div className="mt-5"><EvidenceKey /></div>
      </Part>
      <RequestPanel path={`/levels/${level.id}`} />
      <SublevelRequest level={level} />
    </>
  )
}

/** Alone, so that a drag of the field redraws no more of the foot than this. */
function SublevelRequest({ level }: { level: LevelDetail }) {
  const { field } = useField()
  const [model] = useModel()
  const [quadratic] = useQuadratic()
  const [nucleus] = useNucleus()
  const what = nucleus.on ? { hyperfine: 'true', isotope: nucleus.isotope } : { model, diamagnetic: quadratic ? 'true' : null }
  return <RequestPanel withLink={false} title="The request behind the sublevels" path={`/levels/${level.id}/sublevels`} query={{ field: fieldForUrl(field.tesla, field.unit), ...what }} />
}
