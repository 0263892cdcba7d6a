import { formatHalf, type TwoJ } from '@/lib/atomic/half'
import type { LinearLawValidity } from '@/lib/atomic/intermediate-validity'
import type { AspectValidity, LevelValidity, LineValidity } from '@/lib/atomic/validity'
import { printSignificant } from '@/lib/units/print'

const percent = (share: number): string => `${printSignificant(share * 100, 2)} %`
const invcm = (value: number): string => `${printSignificant(value, 3)} cm⁻¹`
const tesla = (value: number): string => `${printSignificant(value, 3)} T`

/** Where the tolerance is passed; `of` names what it is a part of, where that is not what the sentence spoke of last. */
const limitPart = (limit: number | null, tolerance: number, of = ''): string => {
  if (limit === null) return ''
  const allowed = `${Number((tolerance * 100).toPrecision(6))} %${of}`
  return limit === 0 ? `; ${allowed} is passed at any field` : `; ${allowed} is passed at ${tesla(limit)}`
}

/** One aspect of a line in a sentence: `Positions: the linear law holds; the largest error is 0.0065 cm⁻¹ (0.69 % ...).` */
export function aspectSentence(name: 'Positions' | 'Strengths', aspect: AspectValidity): string {
  const size =
    aspect.relativeError === null
      ? ''
      : name === 'Positions'
        ? `the largest error is ${aspect.errorInvcm === null ? 'not known' : invcm(aspect.errorInvcm)}, ${percent(aspect.relativeError)} of the largest shift`
        : `the largest change is ${percent(aspect.relativeError)} of the strongest component`
  if (aspect.status === 'unknown') return `${name}: validity not known, since ${aspect.reason ?? 'the term is not complete'}${size === '' ? '' : ` (at least: ${size})`}.`
  if (aspect.relativeError === 0 && aspect.fieldLimitTesla === null) return `${name}: the linear law is exact within the term.`
  const verdict = aspect.status === 'valid' ? 'the linear law holds' : 'the linear law does not hold'
  return `${name}: ${verdict}; ${size}${limitPart(aspect.fieldLimitTesla, aspect.tolerance)}.`
}

/** One level in a sentence, with its error beside its own splitting: `3p ²P°₁/₂: off by up to 0.0065 cm⁻¹, 2.8 % of its own largest linear shift.` */
export function levelSentence(name: string, level: LevelValidity): string {
  if (level.errorInvcm === null) return `${name}: validity not known, since ${level.reason ?? 'the level has no S and L'}.`
  const own = level.relativeToShift === null ? '' : `, ${percent(level.relativeToShift)} of its own largest linear shift`
  const least = level.status === 'unknown' ? 'at least ' : ''
  const why = level.status === 'unknown' ? `, ${level.reason ?? 'the term is not complete'}` : ''
  if (level.errorInvcm === 0 && level.status === 'valid') return `${name}: linear without error within its term.`
  return `${name}: off by up to ${least}${invcm(level.errorInvcm)}${own}${limitPart(level.fieldLimitTesla, level.tolerance, ' of μB·B')}${why}.`
}

/** What a page says below a pattern at this field: positions, strengths, then each level that is off. */
export function validitySentence(validity: LineValidity, names: { lower: string; upper: string }): string {
  const parts = [aspectSentence('Positions', validity.positions), aspectSentence('Strengths', validity.strengths)]
  for (const [name, level] of [[names.upper, validity.levels.upper], [names.lower, validity.levels.lower]] as const) {
    if (level.errorInvcm !== null && level.errorInvcm > 0) parts.push(levelSentence(name, level))
  }
  return parts.join(' ')
}

/** A short name for a level that has no other: `J = 3/2`. */
export const nameOfJ = (twoJ: TwoJ): string => `J = ${formatHalf(twoJ)}`

/** The centre of gravity of lines that are not told apart: `Centre of the blend (J = 1 - 2, 1 - 1): ...`. */
export function blendSentence({ blend }: Pick<LinearLawValidity, 'blend'>): string {
  const lines = blend.lines.map((line) => `${formatHalf(line.twoJLower)} \u2013 ${formatHalf(line.twoJUpper)}`).join(', ')
  const name = blend.lines.length > 1 ? `Centre of the blend of J = ${lines}` : 'Centre of the line'
  if (blend.status === 'unknown' || blend.relativeError === null) return `${name}: validity not known, since ${blend.reason ?? 'the term is not complete'}.`
  if (blend.relativeError === 0 && blend.fieldLimitTesla === null) return `${name}: the linear law is exact within the term.`
  const size = `it errs by ${blend.errorInvcm === null ? 'an unknown amount' : invcm(blend.errorInvcm)}, ${percent(blend.relativeError)} of its largest displacement`
  return `${name}: the linear law ${blend.status === 'valid' ? 'holds' : 'does not hold'}; ${size}${limitPart(blend.fieldLimitTesla, blend.tolerance)}.`
}
