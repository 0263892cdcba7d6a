import { G_S } from '@/lib/atomic/constants'
import { linearLawLevelValidity, type LinearLawValidity, linearLawValidity } from '@/lib/atomic/intermediate-validity'
import type { LevelValidity as AtomicLevel, ValidityEnd } from '@/lib/atomic/validity'
import { blendSentence, validitySentence } from '@/lib/atomic/validity-sentence'
import type { GChoice } from '@/lib/prediction/g-values'
import { twice, twoJOf } from '@/lib/prediction/levels'
import { type MembersTold, validityEnd } from '@/lib/prediction/term-levels'
import type { Level } from '@/openapi/schemas/level'
import type { TransitionDetail } from '@/openapi/schemas/transition'
import type { LevelValidity, Validity } from '@/openapi/schemas/validity'

/** What validity is asked for: the g's, the field and the tolerance. */
export type ValidityAsked = GChoice & { fieldTesla: number; tolerance: number }

const told = (id: string | null, level: AtomicLevel): LevelValidity => ({
  level: id,
  status: level.status,
  error_invcm: level.errorInvcm,
  relative_error: level.relativeError,
  relative_to_shift: level.relativeToShift,
  tolerance: level.tolerance,
  field_limit_tesla: level.fieldLimitTesla,
  missing_j: level.missingTwoJ.map((two) => two / 2),
})

const nameOf = (level: Pick<Level, 'configuration' | 'term'>): string => `${level.configuration} ${level.term.label === null ? '' : `${level.term.label} `}${level.term.unicode}`

/** Validity of the linear law for one level from its term's members, at a field. */
export function levelLinearValidity(level: Level, g: number | null, members: MembersTold, asked: ValidityAsked): LevelValidity {
  const end = validityEnd(twoJOf(level), g, members, asked)
  return told(level.id, linearLawLevelValidity(end, asked.fieldTesla, { tolerance: asked.tolerance, gS: asked.gS ?? G_S }))
}

type JudgedLine = Pick<TransitionDetail, 'lower' | 'upper' | 'kind' | 'terms'>

/** How far the linear law may be trusted for a line at a field, from the terms of both ends. */
export const judgeLinear = (line: JudgedLine, ends: { lower: ValidityEnd; upper: ValidityEnd }, asked: ValidityAsked): LinearLawValidity =>
  linearLawValidity({ kind: line.kind, ...ends, fieldTesla: asked.fieldTesla, tolerance: asked.tolerance, gS: asked.gS ?? G_S })

const memberId = ({ levels }: MembersTold, twoJ: number): string | null => levels.find((member) => twice(member.j) === twoJ)?.id ?? null

/** The same as the API tells it: positions, strengths and the centre of the blend apart, and both levels. */
export function toldValidity(line: JudgedLine, validity: LinearLawValidity): Validity {
  const { positions, strengths, blend, levels, method } = validity
  const sentence = validitySentence(validity, { lower: nameOf(line.lower), upper: nameOf(line.upper) })
  return {
    positions: {
      status: positions.status,
      error_invcm: positions.errorInvcm,
      relative_error: positions.relativeError,
      tolerance: positions.tolerance,
      field_limit_tesla: positions.fieldLimitTesla,
    },
    strengths: {
      status: strengths.status,
      relative_error: strengths.relativeError,
      tolerance: strengths.tolerance,
      field_limit_tesla: strengths.fieldLimitTesla,
    },
    blend: {
      status: blend.status,
      error_invcm: blend.errorInvcm,
      relative_error: blend.relativeError,
      tolerance: blend.tolerance,
      field_limit_tesla: blend.fieldLimitTesla,
      lines: blend.lines.map(({ twoJLower, twoJUpper }) => {
        const [low, high] = [memberId(line.terms.lower, twoJLower), memberId(line.terms.upper, twoJUpper)]
        return { transition: low === null || high === null ? null : `${low}~${high}`, j_lower: twoJLower / 2, j_upper: twoJUpper / 2 }
      }),
    },
    levels: { lower: told(line.lower.id, levels.lower), upper: told(line.upper.id, levels.upper) },
    method,
    // of a line that is seen alone the centre follows from positions and strengths
    sentence: blend.lines.length > 1 ? `${sentence} ${blendSentence(validity)}` : sentence,
  }
}
