import type { Level } from '@/openapi/schemas/level'
import type { TransitionDetail } from '@/openapi/schemas/transition'
import type { LevelValidity, Validity, ValidityStatus } from '@/openapi/schemas/validity'
import { halves, significant } from '@/app/_components/number'

/** The worse of two judgements: not valid before not known before valid. */
export const worse = (a: ValidityStatus, b: ValidityStatus): ValidityStatus => (a === 'not_valid' || b === 'not_valid' ? 'not_valid' : a === 'unknown' || b === 'unknown' ? 'unknown' : 'valid')

export const percent = (value: number): string => `${significant(value * 100, 2)}\u202f%`

function aspect(name: string, status: ValidityStatus, error: number | null): string {
  if (error === null || error === 0) return status === 'unknown' ? `${name} cannot be judged` : `${name} exact within the term`
  if (status === 'valid') return `${name} good to ${percent(error)}`
  return status === 'unknown' ? `${name} off by ${percent(error)} or more` : `${name} off by ${percent(error)}`
}

/** What mixes: a level that linear misses by more than the tolerance of its own splitting, with the J's of its term. */
function mixing(level: Level, validity: LevelValidity, members: TransitionDetail['terms']['lower']): string | null {
  const { relative_to_shift: error, tolerance } = validity
  if (error === null || error <= tolerance) return null
  const js = members.levels.map((member) => member.j).filter((j) => Math.abs(j - level.term.j) <= 1).sort((a, b) => a - b)
  const names = js.map(halves)
  const last = names.pop()
  const who = names.length === 0 ? `J = ${last} mixes with others` : `J = ${names.join(', ')} and ${last} are mixing`
  return `${who}: linear is off by ${percent(error)} of the linear shift of J = ${halves(level.term.j)} here.`
}

/** The judgement of the linear law in a line or two, for the place where the field is set. */
export function shortVerdict(validity: Validity, line: TransitionDetail, inForce: 'linear' | 'intermediate'): string {
  const { positions, strengths, levels } = validity
  const both = strengths.relative_error === 0 && positions.relative_error === 0 && positions.status === 'valid' && strengths.status === 'valid'
  const whose = inForce === 'intermediate' ? 'The linear law here: ' : ''
  const first = both ? 'Positions and strengths are exact within the terms: neither has a neighbour to mix with.' : `${whose}${aspect(whose === '' ? 'Positions' : 'positions', positions.status, positions.relative_error)}, ${aspect('strengths', strengths.status, strengths.relative_error)}.`
  const rest = [mixing(line.upper, levels.upper, line.terms.upper), mixing(line.lower, levels.lower, line.terms.lower)].filter((text) => text !== null)
  return [first, ...rest].join(' ')
}
