import { G_S } from '@/lib/atomic/constants'
import { levelValidity, type LevelValidity as AtomicLevel, lineValidity, type TermLevels, type ValidityEnd } from '@/lib/atomic/validity'
import { validitySentence } from '@/lib/atomic/validity-sentence'
import { type GChoice, memberG } from '@/lib/prediction/g-values'
import { twice, twoJOf } from '@/lib/prediction/levels'
import type { Level } from '@/openapi/schemas/level'
import type { TransitionDetail } from '@/openapi/schemas/transition'
import type { LevelValidity, Validity } from '@/openapi/schemas/validity'

/** The levels of one term as the API tells them. */
export type MembersTold = TransitionDetail['terms']['lower']

function termOf({ s, l, levels }: MembersTold, choice: GChoice): TermLevels | null {
  if (s === null || l === null) return null
  const twoS = twice(s)
  return {
    twoS,
    l,
    levels: levels.map((member) => {
      const twoJ = twice(member.j)
      return { twoJ, energyInvcm: member.energy_invcm, g: memberG({ twoS, l, twoJ }, member.g_j, choice) }
    }),
  }
}

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

/** Linear validity of one level from its term's members, at a field. */
export function levelLinearValidity(level: Level, g: number | null, members: MembersTold, asked: GChoice & { fieldTesla: number; tolerance: number }): LevelValidity {
  const end: ValidityEnd = { twoJ: twoJOf(level), g, term: termOf(members, asked) }
  return told(level.id, levelValidity(end, asked.fieldTesla, { tolerance: asked.tolerance, gS: asked.gS ?? G_S }))
}

/** How far the linear law may be trusted for a line at a field: positions and strengths apart, and both levels. */
export function linearValidity(
  line: Pick<TransitionDetail, 'lower' | 'upper' | 'kind' | 'terms'>,
  asked: GChoice & { fieldTesla: number; tolerance: number },
  gLower: number | null,
  gUpper: number | null,
): Validity {
  const validity = lineValidity({
    kind: line.kind,
    lower: { twoJ: twoJOf(line.lower), g: gLower, term: termOf(line.terms.lower, asked) },
    upper: { twoJ: twoJOf(line.upper), g: gUpper, term: termOf(line.terms.upper, asked) },
    fieldTesla: asked.fieldTesla,
    tolerance: asked.tolerance,
    gS: asked.gS ?? G_S,
  })
  const { positions, strengths, levels, method } = validity
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
    levels: { lower: told(line.lower.id, levels.lower), upper: told(line.upper.id, levels.upper) },
    method,
    sentence: validitySentence(validity, { lower: nameOf(line.lower), upper: nameOf(line.upper) }),
  }
}
