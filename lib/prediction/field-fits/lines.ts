import type { FitEnd, FitLevel, FitLine } from '@/lib/atomic/field-fit-model'
import { PhysicsError } from '@/lib/atomic/errors'
import type { Snapshot } from '@/lib/catalogue/shape'
import { chooseG, type GChoice } from '@/lib/prediction/g-values'
import { besideOthers, inlineLevel, termFaults } from '@/lib/prediction/inline'
import { lsNumbers, type PhysicalLevel, twoJOf } from '@/lib/prediction/levels'
import { levelIndex } from '@/lib/prediction/resolve'
import { lineFacts, type LineFacts, orderedPair, transitionDetail } from '@/lib/prediction/transition'
import { type Fault, isProblemCode, Problem } from '@/lib/problem'
import type { FieldFitRequest } from '@/openapi/operations/field-fits'
import type { InlineLevel } from '@/openapi/operations/inline'
import type { TransitionDetail } from '@/openapi/schemas/transition'

type GivenLine = FieldFitRequest['lines'][number]

/** A level with the name it is told by; null where it stands in no table. */
export interface NamedLevel {
  id: string | null
  level: PhysicalLevel
  /** All levels of its term that are known, itself included. */
  members: { id: string | null; level: PhysicalLevel }[]
}

/** A line of a fit, read and judged. */
export interface ReadLine {
  fit: FitLine
  facts: LineFacts
  id: string | null
  name: string
  lower: NamedLevel
  upper: NamedLevel
  /** The transition of the table; null for a line given in the request. */
  detail: TransitionDetail | null
}

const faultAt = (pointer: string, error: unknown): Fault => {
  if (error instanceof Problem) return { pointer, code: error.code, detail: error.detail }
  if (error instanceof PhysicsError && isProblemCode(error.code)) return { pointer: error.field === 'g_values' ? '/g_values' : pointer, code: error.code, detail: error.detail }
  throw error
}

/** Levels of a line given in the request, with every fault found in them. */
function inlineEnd(given: InlineLevel, others: readonly InlineLevel[], pointer: string, gS: number | null, faults: Fault[]): NamedLevel | null {
  const found = termFaults([given, ...others], besideOthers(pointer))
  faults.push(...found)
  if (found.length > 0) return null
  const level = inlineLevel(given, gS)
  return { id: null, level, members: [{ id: null, level }, ...others.map((other) => ({ id: null, level: inlineLevel(other, gS) }))] }
}

function tableEnd(snapshot: Snapshot, index: number): NamedLevel {
  const level = snapshot.level(index)
  return { id: level.id, level, members: snapshot.termMembers(index).indices.map((member) => ({ id: snapshot.levelId(member), level: snapshot.level(member) })) }
}

type Ends = Pick<ReadLine, 'id' | 'name' | 'lower' | 'upper' | 'facts' | 'detail'>

function endsOf(snapshot: Snapshot, given: GivenLine, pointer: string, gS: number | null, faults: Fault[]): Ends | null {
  if ('transition' in given) {
    try {
      const [first = '', second = ''] = given.transition.split('~')
      const [low, high] = orderedPair(snapshot, levelIndex(snapshot, first, 'transition'), levelIndex(snapshot, second, 'transition'))
      const detail = transitionDetail(snapshot, low, high, given.kind ?? undefined)
      return { id: detail.id, name: detail.id, lower: tableEnd(snapshot, low), upper: tableEnd(snapshot, high), facts: detail, detail }
    } catch (error) {
      faults.push(faultAt(`${pointer}/transition`, error))
      return null
    }
  }
  const lower = inlineEnd(given.lower, given.lower_others ?? [], `${pointer}/lower`, gS, faults)
  const upper = inlineEnd(given.upper, given.upper_others ?? [], `${pointer}/upper`, gS, faults)
  if (lower === null || upper === null) return null
  if (upper.level.energy_invcm < lower.level.energy_invcm) {
    faults.push({ pointer: `${pointer}/upper/energy_invcm`, code: 'physics_impossible', detail: 'The upper level lies below the lower one; exchange them, and with them m_lower and m_upper.' })
    return null
  }
  try {
    const name = `${lower.level.term.symbol} - ${upper.level.term.symbol}`
    return { id: null, name, lower, upper, facts: lineFacts(lower.level, upper.level, given.kind ?? undefined), detail: null }
  } catch (error) {
    faults.push(faultAt(`${pointer}/upper/energy_invcm`, error))
    return null
  }
}

const fitLevel = (key: string, level: PhysicalLevel, choice: GChoice, end: string): FitLevel => {
  const { g, unc } = chooseG(level, choice, end)
  return { twoJ: twoJOf(level), energyInvcm: level.energy_invcm, energyUnc: level.energy_unc_invcm, g, gUnc: unc, key }
}

function fitEnd(named: NamedLevel, choice: GChoice, end: 'lower' | 'upper', line: number): FitEnd {
  const keyOf = (id: string | null, level: PhysicalLevel) => id ?? `${line} ${end} ${level.term.j}`
  const numbers = lsNumbers(named.level)
  const own = fitLevel(keyOf(named.id, named.level), named.level, choice, end)
  if (own.g === null && own.twoJ > 0) {
    throw new PhysicsError('g_unknown', `${named.id ?? `The ${end} level`} (${named.level.term.symbol}) has no g_J: its coupling gives none and none is measured, so its splitting cannot be computed.`)
  }
  const levels = named.members.map((member) => fitLevel(keyOf(member.id, member.level), member.level, choice, end))
  return { ...own, term: numbers === null ? null : { twoS: numbers.twoS, l: numbers.l, levels } }
}

function readLine(snapshot: Snapshot, given: GivenLine, number: number, choice: GChoice, faults: Fault[]): ReadLine | null {
  const pointer = `/lines/${number}`
  const ends = endsOf(snapshot, given, pointer, choice.gS, faults)
  if (ends === null) return null
  const { facts, lower, upper } = ends
  if (!facts.verdict.rigorous) {
    const failed = facts.verdict.rules.filter((rule) => rule.basis === 'rigorous' && rule.verdict === 'fail').map((rule) => `${rule.rule}: ${rule.detail}`)
    faults.push({ pointer, code: 'transition_forbidden', detail: `${ends.name} is forbidden as ${facts.kind}, so it has no components. Broken: ${failed.join('; ')}.` })
    return null
  }
  try {
    const zero = given.zero ?? null
    const fit: FitLine = {
      kind: facts.kind,
      lower: fitEnd(lower, choice, 'lower', number),
      upper: fitEnd(upper, choice, 'upper', number),
      centreInvcm: facts.wavenumber_invcm,
      ...(zero === null ? {} : { zero: sharedZero(zero) }),
    }
    return { ...ends, fit }
  } catch (error) {
    faults.push(faultAt(pointer, error))
    return null
  }
}

/** Names of zeros given by hand are kept apart from those made for lines that have one of their own. */
const MARK = '='
const sharedZero = (name: string): string => `${MARK}${name}`
export const zeroTold = (name: string): string => (name.startsWith(MARK) ? name.slice(MARK.length) : name)

/** The lines of a fit; every fault found in any of them is added to `faults`. */
export function readLines(snapshot: Snapshot, body: Pick<FieldFitRequest, 'lines' | 'g_values' | 'g_s'>, faults: Fault[]): (ReadLine | null)[] {
  const choice: GChoice = { gValues: body.g_values, gS: body.g_s ?? null }
  return body.lines.map((given, number) => readLine(snapshot, given, number, choice, faults))
}
