'use client'
import { fieldIn } from '@/lib/units/field'
import type { DeterminedField } from '@/openapi/schemas/field-fits'
import { Notice } from '@/app/_components/notice'
import { significant } from '@/app/_components/number'
import { Choices } from '@/app/_components/plots/plot-frame'
import type { ShownFieldUnit } from './use-measurement'
import { fieldText, modelSentence, PART_NAME, uncText } from './words'

const FIELD_CHOICES = (['T', 'mT', 'G', 'kG'] as const).map((value) => ({ value, label: value }))

interface Props {
  answer: DeterminedField
  unit: ShownFieldUnit
  onUnit: (unit: ShownFieldUnit) => void
  /** Takes another reading of the peaks by hand. */
  onTake: (components: DeterminedField['alternatives'][number]['components']) => void
}

const chiText = (answer: DeterminedField): string => {
  if (answer.degrees_of_freedom === 0) return 'Nothing is left over to test the fit by: add a position.'
  if (answer.chi_squared === null) return `${answer.degrees_of_freedom} degree${answer.degrees_of_freedom === 1 ? '' : 's'} of freedom; uncertainties were judged by the scatter.`
  return `χ² = ${significant(answer.chi_squared, 3)} for ${answer.degrees_of_freedom} degree${answer.degrees_of_freedom === 1 ? '' : 's'} of freedom${answer.scaled_unc_tesla === null || answer.statistical_unc_tesla === null ? '.' : `; scaled by the scatter the uncertainty from the positions would be ${significant(answer.scaled_unc_tesla / answer.statistical_unc_tesla, 2)} times as large.`}`
}

/** The field with its uncertainties, in words and large. */
export function FieldResult({ answer, unit, onUnit, onTake }: Props) {
  const unknown = answer.budget.filter((row) => row.status === 'unknown').map((row) => PART_NAME[row.part].replace(/^./, (first) => (first === 'μ' ? first : first.toLowerCase())))
  const { field_known_unc_tesla: unc, expanded_unc_tesla: expanded } = answer
  return (
    <div>
      <div className="flex flex-wrap items-end justify-between gap-x-6 gap-y-2">
        <p className="font-text text-4xl leading-none whitespace-nowrap" data-field-tesla={answer.field_tesla}>
          <span className="italic">B</span> = <span className="num">{fieldText(answer.field_tesla, unc, unit)}</span>
        </p>
        <div className="no-print"><Choices label="Shown in" value={unit} choices={FIELD_CHOICES} onChange={onUnit} /></div>
      </div>
      <dl className="facts mt-4 text-sm">
        <dt>Standard uncertainty</dt>
        <dd className="num">{unc === null ? 'not known: no uncertainties were stated and nothing is left over to judge them by' : uncText(unc, unit)}{unc === null || answer.uncertainty_complete ? '' : ', known parts only'}</dd>
        {expanded === null ? null : (
          <>
            <dt>Expanded, k = 2</dt>
            <dd className="num">{uncText(expanded, unit)}</dd>
          </>
        )}
        <dt>Fit</dt>
        <dd>{chiText(answer)}</dd>
        <dt>Model</dt>
        <dd>{modelSentence(answer)}</dd>
        {answer.field_tesla < 0 ? (
          <>
            <dt>Sign</dt>
            <dd>Below zero: the field is reversed against the direction the components were named for.</dd>
          </>
        ) : null}
      </dl>
      {unknown.length > 0 && unc !== null ? <p className="note mt-3">Not known in the table, and so not in these uncertainties: {unknown.join(', ')}.</p> : null}
      {answer.alternatives.length > 0 ? (
        <div className="mt-4">
          <Notice tone="warn" title="The peaks can be read otherwise about as well.">
            <ul className="mt-1 space-y-1">
              {answer.alternatives.map((other, i) => (
                <li key={i} className="flex flex-wrap items-baseline gap-x-3">
                  <span className="num">B = {significant(fieldIn(other.field_tesla, unit), 5)}&#8239;{unit}</span>
                  <span className="note">{other.cost_more < 0.05 ? 'just as well' : `χ² and what stays unseen ${significant(other.cost_more, 2)} more`}</span>
                  <button type="button" className="btn btn-small" onClick={() => onTake(other.components)}>Take this reading</button>
                </li>
              ))}
            </ul>
            <p>Name a component or a polarisation, or measure another peak, to tell them apart.</p>
          </Notice>
        </div>
      ) : null}
    </div>
  )
}
