'use client'
import { fieldIn, type FieldUnit } from '@/lib/units/field'
import type { DeterminedField, FitResidual, FittedG } from '@/openapi/schemas/field-fits'
import { DataTable, type Column } from '@/app/_components/data-table'
import { significant } from '@/app/_components/number'
import { PolarisationSign } from '@/app/_components/plots/polarisation'
import { signed } from '@/app/_components/plots/ruler'
import { readingText } from './positions-grid'
import { residualIn, type ResidualUnit } from './residual-plot'
import { PART_NAME, uncText } from './words'

interface ResidualsProps {
  residuals: readonly FitResidual[]
  /** What the numbers given are: `Position, nm`. */
  header: string
  unit: ResidualUnit
  shownField: FieldUnit
  severalLines: boolean
  /** False where the field is given: there is no influence on it. */
  withInfluence: boolean
}

/** Rounding of a point that the fit must pass through is no residual. */
const NO_RESIDUAL_INVCM = 1e-9

/** Every measurement with its assignment, its residual and its influence; copies carry all of it in full. */
export function ResidualsTable({ residuals, header, unit, shownField, severalLines, withInfluence }: ResidualsProps) {
  const columns: Column<FitResidual>[] = [
    { name: 'measurement', header: 'No.', align: 'right', rowHeader: true, value: (r) => r.measurement + 1 },
    ...(severalLines ? [{ name: 'line', header: 'Line', align: 'right', value: (r: FitResidual) => r.line + 1 } satisfies Column<FitResidual>] : []),
    { name: 'position', header, align: 'right', value: (r) => r.position, cell: (r) => String(r.position).replace('-', '−') },
    { name: 'position_unc', header: '± σ', align: 'right', value: (r) => r.position_unc, cell: (r) => (r.position_unc === null ? <span className="text-muted">not stated</span> : String(r.position_unc)) },
    {
      name: 'component', header: 'Component', value: (r) => readingText(r.components),
      cell: (r) => (
        <span className="inline-flex items-center gap-1.5">
          <PolarisationSign q={r.components[0]?.q ?? 0} size={18} />
          {readingText(r.components)}
          {r.assigned === 'automatic' ? <span className="note text-2xs">found</span> : null}
        </span>
      ),
    },
    { name: 'fitted_invcm', header: 'Fitted, cm⁻¹', align: 'right', value: (r) => r.fitted_invcm, cell: (r) => r.fitted_invcm.toFixed(5).replace('-', '−'), only: 'copy' },
    { name: 'residual_invcm', header: 'Residual, cm⁻¹', align: 'right', value: (r) => r.residual_invcm, only: 'copy' },
    { name: 'residual', header: `Residual, ${unit.name}`, align: 'right', value: (r) => residualIn(unit, r, r.residual_invcm), cell: (r) => (Math.abs(r.residual_invcm) < NO_RESIDUAL_INVCM ? '0' : signed(residualIn(unit, r, r.residual_invcm), 2)), only: 'screen' },
    { name: 'standardised', header: 'in σ', align: 'right', value: (r) => r.standardised, cell: (r) => (r.standardised === null ? <span className="text-muted">–</span> : signed(r.standardised, 2)) },
    { name: 'leverage', header: 'Leverage', align: 'right', value: (r) => r.leverage, cell: (r) => r.leverage.toFixed(2) },
    ...(!withInfluence ? [] : [{ name: 'influence', header: 'Influence, σ', align: 'right', value: (r: FitResidual) => r.influence, cell: (r: FitResidual) => (r.influence === null ? <span className="text-muted">–</span> : signed(r.influence, 2)) } satisfies Column<FitResidual>, {
      name: `field_without_${shownField}`, header: `B without it, ${shownField}`, align: 'right', value: (r: FitResidual) => (r.field_without_tesla === null ? null : fieldIn(r.field_without_tesla, shownField)),
      cell: (r: FitResidual) => (r.field_without_tesla === null ? <span className="text-muted">undetermined</span> : significant(fieldIn(r.field_without_tesla, shownField), 6)),
    } satisfies Column<FitResidual>]),
  ]
  return <DataTable columns={columns} rows={residuals} rowKey={(r) => String(r.measurement)} caption="Measurements and residuals" hideCaption />
}

/** What the uncertainty is made of. */
export function BudgetTable({ answer, unit }: { answer: DeterminedField; unit: FieldUnit }) {
  const total = answer.field_known_unc_tesla
  type Line = DeterminedField['budget'][number]
  const columns: Column<Line>[] = [
    { name: 'part', header: 'Part', rowHeader: true, value: (row) => row.part, cell: (row) => PART_NAME[row.part] },
    { name: `unc_${unit}`, header: 'One σ of B', align: 'right', value: (row) => (row.value_tesla === null ? null : fieldIn(row.value_tesla, unit)), cell: (row) => (row.status === 'exact' ? 'none' : row.value_tesla === null ? <span className="text-warn">not known</span> : uncText(row.value_tesla, unit)) },
    { name: 'share', header: 'Share', align: 'right', value: (row) => (row.value_tesla === null || !total ? null : (row.value_tesla / total) ** 2), cell: (row) => (row.value_tesla === null || row.value_tesla === 0 || !total ? <span className="text-muted">–</span> : (row.value_tesla / total) ** 2 < 1e-4 ? 'under 0.01 %' : `${significant(100 * (row.value_tesla / total) ** 2, 2)} %`) },
  ]
  return <DataTable columns={columns} rows={answer.budget} rowKey={(row) => row.part} caption="Budget of the uncertainty" hideCaption />
}

export function GBudgetTable({ fitted }: { fitted: FittedG }) {
  type Line = FittedG['budget'][number]
  const columns: Column<Line>[] = [
    { name: 'part', header: 'Part', rowHeader: true, value: (row) => row.part, cell: (row) => PART_NAME[row.part] },
    { name: 'unc', header: 'One σ of g', align: 'right', value: (row) => row.value, cell: (row) => (row.status === 'exact' ? 'none' : row.value === null ? <span className="text-warn">not known</span> : significant(row.value, 2)) },
  ]
  return <DataTable columns={columns} rows={fitted.budget} rowKey={(row) => row.part} caption={`Budget of g of ${fitted.level}`} hideCaption />
}

/** Numbers for those who carry the fit on: chi-squared, zeros, scale and covariance. */
export function FitNumbers({ answer }: { answer: Pick<DeterminedField, 'parameters' | 'parameter_units' | 'covariance' | 'zeros'> & { scale?: DeterminedField['scale'] } }) {
  const rows = answer.parameters.map((name, i) => ({ name, unit: answer.parameter_units[i] ?? '', values: answer.covariance?.[i] ?? [] }))
  const columns: Column<(typeof rows)[number]>[] = [
    { name: 'parameter', header: '', rowHeader: true, value: (row) => row.name, cell: (row) => <>{row.name}{row.unit === '1' ? '' : <span className="text-muted">, {row.unit.replace('-1', '⁻¹')}</span>}</> },
    ...answer.parameters.map((name, j): Column<(typeof rows)[number]> => ({ name, header: name, align: 'right', value: (row) => row.values[j] ?? null, cell: (row) => significant(row.values[j] ?? 0, 4) })),
  ]
  return (
    <>
      <dl className="facts max-w-2xl text-sm">
        {answer.zeros.map((zero) => (
          <div key={zero.name} className="contents">
            <dt>Zero, {zero.name}</dt>
            <dd className="num">
              {zero.position_invcm.toFixed(5)}{zero.position_unc_invcm === null ? '' : ` ± ${significant(zero.position_unc_invcm, 2)}`} cm⁻¹
              {zero.table_offset_invcm === null ? '' : `, ${signed(zero.table_offset_invcm, 3)} cm⁻¹ from the table`}
            </dd>
          </div>
        ))}
        {answer.scale && answer.scale.status !== 'exact' ? (
          <>
            <dt>Scale</dt>
            <dd className="num">{significant(answer.scale.value, 8)}{answer.scale.unc === null ? '' : ` ± ${significant(answer.scale.unc, 2)}`}</dd>
          </>
        ) : null}
      </dl>
      {answer.covariance === null ? <p className="note mt-3">There is no covariance: no uncertainties were stated and nothing is left over to judge them by.</p> : (
        <div className="mt-3"><DataTable columns={columns} rows={rows} rowKey={(row) => row.name} caption="Covariance" hideCaption summary="Covariance, from the stated uncertainties" /></div>
      )}
    </>
  )
}
