import { G_S } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import { landeG } from '@/lib/atomic/lande'
import type { TermLevels } from '@/lib/atomic/mixing'
import { defaultKind, judge, type Kind } from '@/lib/atomic/rules'
import type { Snapshot } from '@/lib/catalogue/shape'
import { type Fault, faultsProblem } from '@/lib/problem'
import type { LineEndGiven, LineGiven, MultipletGiven } from '@/lib/prediction/bulk/block'
import { canJoin } from '@/lib/prediction/bulk/places'
import { chooseG, type GChoice, memberG } from '@/lib/prediction/g-values'
import { inlineFaults, inlineLevel, type InlineLevelGiven, termFaults } from '@/lib/prediction/inline'
import { judgedOf, type PhysicalLevel, twice, twoJOf } from '@/lib/prediction/levels'
import { transitionIndices } from '@/lib/prediction/resolve'
import { membersOf, orderedPair } from '@/lib/prediction/transition'
import type { PredictionLine, PredictionMultiplet } from '@/openapi/operations/predictions'

/** The g in force of a level; refuses a level that splits and has none. */
function gOf(level: PhysicalLevel, choice: GChoice, name: string): number | null {
  const { g, none } = chooseG(level, choice, name)
  if (g === null && !none) throw new PhysicsError('g_unknown', `${name} (${level.term.symbol}) has no g_J: its coupling gives none and none is measured, so its splitting cannot be computed.`)
  return g
}

/** The rules that a forbidden pair breaks, for the refusal. */
function refuseForbidden(lower: PhysicalLevel, upper: PhysicalLevel, kind: Kind, name: string): void {
  const verdict = judge(judgedOf(lower), judgedOf(upper), kind)
  if (verdict.rigorous) return
  const failed = verdict.rules.filter((rule) => rule.basis === 'rigorous' && rule.verdict === 'fail').map((rule) => `${rule.rule}: ${rule.detail}`)
  throw new PhysicsError('transition_forbidden', `${name} is forbidden as ${kind}, so it has no components. Broken: ${failed.join('; ')}.`)
}

const meanOf = (levels: readonly { energy_invcm: number }[]): number => levels.reduce((sum, level) => sum + level.energy_invcm, 0) / levels.length

/** Makes plain blocks of what a request names or gives. Levels that several lines share are read once. */
export class BlockMaker {
  /** How many inline blocks had the lower energy on their upper side. */
  exchanged = 0
  private readonly terms = new Map<number, TermLevels | null>()

  constructor(private readonly snapshot: Snapshot, private readonly choice: GChoice) {}

  line(asked: PredictionLine, at: string): LineGiven {
    if ('transition' in asked) return this.tableLine(asked.transition)
    const faults: Fault[] = [...inlineFaults(asked.lower, `${at}/lower`), ...inlineFaults(asked.upper, `${at}/upper`)]
    if (asked.lower.energy_invcm === asked.upper.energy_invcm) {
      faults.push({ pointer: `${at}/upper/energy_invcm`, code: 'zero_interval', detail: 'The two levels have equal energies, so no transition joins them; give two different energies.' })
    }
    if (faults.length > 0) throw faultsProblem(faults)
    const [low, high] = asked.upper.energy_invcm < asked.lower.energy_invcm ? this.turned(asked.upper, asked.lower) : [asked.lower, asked.upper]
    const [lower, upper] = [inlineLevel(low, this.choice.gS), inlineLevel(high, this.choice.gS)]
    const kind = defaultKind(low.parity, high.parity, twice(low.j), twice(high.j))
    refuseForbidden(lower, upper, kind, 'The line given inline')
    const end = (given: InlineLevelGiven, name: string): LineEndGiven => {
      const g = gOf(inlineLevel(given, this.choice.gS), this.choice, name)
      return { twoJ: twice(given.j), energyInvcm: given.energy_invcm, g, term: { twoS: twice(given.s), l: given.l, levels: [{ twoJ: twice(given.j), energyInvcm: given.energy_invcm, g }] } }
    }
    return { form: 'line', transition: null, kind, lower: end(low, 'lower'), upper: end(high, 'upper') }
  }

  multiplet(asked: PredictionMultiplet, at: string): MultipletGiven {
    const block = 'transition' in asked ? this.tableMultiplet(asked.transition) : this.inlineMultiplet(asked, at)
    const joined = block.lower.levels.some((lower) => block.upper.levels.some((upper) => canJoin(block.kind, lower.twoJ, upper.twoJ)))
    if (!joined) throw new PhysicsError('transition_forbidden', `No ${block.kind} line joins these terms: none of their J can be joined.`)
    return block
  }

  private turned<T>(low: T, high: T): [T, T] {
    this.exchanged += 1
    return [low, high]
  }

  private tableLine(id: string): LineGiven {
    const { snapshot } = this
    const [low, high] = orderedPair(snapshot, ...transitionIndices(snapshot, id))
    const [lower, upper] = [snapshot.level(low), snapshot.level(high)]
    const kind = defaultKind(lower.term.parity, upper.term.parity, twoJOf(lower), twoJOf(upper))
    const transition = `${lower.id}~${upper.id}`
    refuseForbidden(lower, upper, kind, transition)
    const end = (level: typeof lower, index: number): LineEndGiven => {
      const g = gOf(level, this.choice, level.id)
      const term = this.termOf(index)
      const own = term === null ? null : { ...term, levels: term.levels.map((member) => (member.twoJ === twoJOf(level) ? { ...member, g } : member)) }
      return { twoJ: twoJOf(level), energyInvcm: level.energy_invcm, g, term: own }
    }
    return { form: 'line', transition, kind, lower: end(lower, low), upper: end(upper, high) }
  }

  private tableMultiplet(id: string): MultipletGiven {
    const { snapshot } = this
    const [low, high] = orderedPair(snapshot, ...transitionIndices(snapshot, id))
    const [lower, upper] = [snapshot.level(low), snapshot.level(high)]
    const [lowerTerm, upperTerm] = [this.termOf(low), this.termOf(high)]
    if (lowerTerm === null || upperTerm === null) {
      const which = [lowerTerm === null ? lower.id : null, upperTerm === null ? upper.id : null].filter((one) => one !== null)
      throw new PhysicsError('term_incomplete', `${which.join(' and ')} ${which.length > 1 ? 'have' : 'has'} no S and L in ${which.length > 1 ? 'their' : 'its'} coupling, so no multiplet can be made of it; ask for the line instead.`)
    }
    if (snapshot.termMembers(low).indices.includes(high)) {
      throw new PhysicsError('zero_interval', `${lower.id} and ${upper.id} belong to one term, and a multiplet joins two; ask for the line instead.`)
    }
    return { form: 'multiplet', transition: `${lower.id}~${upper.id}`, kind: lower.term.parity === upper.term.parity ? 'M1' : 'E1', lower: lowerTerm, upper: upperTerm }
  }

  private inlineMultiplet(asked: { lower: InlineLevelGiven[]; upper: InlineLevelGiven[] }, at: string): MultipletGiven {
    const faults: Fault[] = [...termFaults(asked.lower, (i) => `${at}/lower/${i}`), ...termFaults(asked.upper, (i) => `${at}/upper/${i}`)]
    if (meanOf(asked.lower) === meanOf(asked.upper)) faults.push({ pointer: `${at}/upper`, code: 'zero_interval', detail: 'The two terms have equal mean energies, so neither is the lower one.' })
    if (faults.length > 0) throw faultsProblem(faults)
    const [low, high] = meanOf(asked.upper) < meanOf(asked.lower) ? this.turned(asked.upper, asked.lower) : [asked.lower, asked.upper]
    const term = (levels: readonly InlineLevelGiven[]): TermLevels => ({
      twoS: twice(levels[0]?.s ?? 0),
      l: levels[0]?.l ?? 0,
      levels: levels
        .map((level) => ({ twoJ: twice(level.j), energyInvcm: level.energy_invcm, g: gOf(inlineLevel(level, this.choice.gS), this.choice, 'level') }))
        .sort((a, b) => a.twoJ - b.twoJ),
    })
    return { form: 'multiplet', transition: null, kind: low[0]?.parity === high[0]?.parity ? 'M1' : 'E1', lower: term(low), upper: term(high) }
  }

  /** The known levels of a level's term with the g in force; null where it has no S and L. */
  private termOf(index: number): TermLevels | null {
    const known = this.terms.get(index)
    if (known !== undefined) return known
    const { s, l, levels } = membersOf(this.snapshot, index)
    const term: TermLevels | null =
      s === null || l === null
        ? null
        : {
            twoS: twice(s),
            l,
            levels: levels.map((member) => {
              const numbers = { twoS: twice(s), l, twoJ: twice(member.j) }
              return { twoJ: numbers.twoJ, energyInvcm: member.energy_invcm, g: memberG(numbers, member.g_j, this.choice) ?? (numbers.twoJ === 0 ? null : landeG(numbers, { gS: this.choice.gS ?? G_S })) }
            }),
          }
    this.terms.set(index, term)
    return term
  }
}

