'use client'
import type { DeterminedG, FittedG } from '@/openapi/schemas/field-fits'
import { Quantity } from '@/app/_components/quantity'
import { significant, withUncertainty } from '@/app/_components/number'
import { GBudgetTable } from './tables'

function One({ fitted, end }: { fitted: FittedG; end: 'lower' | 'upper' }) {
  return (
    <div className="mt-4 first:mt-0">
      <p className="font-text text-3xl leading-tight" data-g={fitted.g_j}>
        <span className="italic">g</span> of the {end} level = <span className="num">{(fitted.g_j_known_unc === null ? null : withUncertainty(fitted.g_j, fitted.g_j_known_unc)) ?? significant(fitted.g_j, 6)}</span>
      </p>
      <dl className="facts mt-2 mb-3 text-sm">
        <dt>Level</dt>
        <dd>{fitted.level}; the table has g = <Quantity value={fitted.table_g_j} digits={8} /></dd>
        <dt>Expanded, k = 2</dt>
        <dd className="num">{fitted.expanded_unc === null ? 'not known' : significant(fitted.expanded_unc, 2)}{fitted.expanded_unc !== null && fitted.g_j_unc === null ? ', known parts only' : ''}</dd>
      </dl>
      <GBudgetTable fitted={fitted} />
    </div>
  )
}

/** g of one or both levels at the field given. */
export function GResult({ answer }: { answer: DeterminedG }) {
  return (
    <div>
      {answer.upper ? <One fitted={answer.upper} end="upper" /> : null}
      {answer.lower ? <One fitted={answer.lower} end="lower" /> : null}
      <p className="note mt-3">
        {answer.model_valid === false ? 'The linear law does not hold at this field, so these values carry its error.' : answer.model_valid === null ? 'Fitted in the linear law; whether it holds at this field is not known.' : 'Fitted in the linear law, which holds at this field.'}
      </p>
    </div>
  )
}
