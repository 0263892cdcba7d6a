import { formatHalf } from '@/lib/atomic/half'
import type { LevelRow, SpeciesRow } from '../rows'
import { printLevelTerm } from '../values'
import { countMovedLines, TELLING_MOVE_INVCM } from './lines-moved'
import type { UnionLevel, Work } from './work'

/** All that names a level within its species, as the database's own constraint joins it. */
export const nameOf = (r: LevelRow): string =>
  [r.configuration, r.coupling, r.label ?? '', r.parity, r.twoS ?? '', r.l ?? '', r.twoK ?? '', r.coreTwoS ?? '', r.coreL ?? '', r.coreTwoJ ?? '', r.lOuter ?? '', r.outerTwoJ ?? '', r.twoJ, r.repeatIndex ?? 0].join('|')

const ids = (levels: readonly { id: string }[]): string => {
  const shown = levels.slice(0, 3).map((level) => level.id).join(', ')
  return levels.length > 3 ? `${shown} and ${levels.length - 3} more` : shown
}

function checkTwins(levels: readonly UnionLevel[]): void {
  const byName = new Map<string, UnionLevel[]>()
  for (const level of levels) {
    const name = nameOf(level.row)
    const same = byName.get(name)
    if (same === undefined) byName.set(name, [level])
    else same.push(level)
  }
  for (const same of byName.values()) {
    if (same.length < 2) continue
    for (const level of same) {
      const others = same.filter((other) => other !== level)
      level.work?.findings.error('duplicate_level', 'term', `${ids(others)} has the same configuration, label, term and J (${level.row.configuration} ${printLevelTerm(level.row)}): correct that one instead, or tell them apart by label or repeat_index.`)
    }
  }
}

function checkZero(levels: readonly UnionLevel[], works: readonly Work[]): void {
  const zero = levels.filter((level) => level.row.energyInvcm === 0)
  for (const level of zero.length > 1 ? zero : []) {
    level.work?.findings.error('second_zero', 'energy_invcm', `${ids(zero.filter((other) => other !== level))} lies at zero already: a species has one ground level.`)
  }
  if (zero.length > 0 || levels.length === 0) return
  const removing = works.filter((work) => {
    const before = work.published?.row as LevelRow | undefined
    return before !== undefined && before.status === 'active' && before.energyInvcm === 0
  })
  // where there was none before, the first change that makes or moves a level says so
  const making = works.filter(({ row, published }) => row !== null && (row as LevelRow).status === 'active' && (published?.row as LevelRow | undefined)?.energyInvcm !== (row as LevelRow).energyInvcm)
  const told = removing.length > 0 ? removing : making.slice(0, 1)
  for (const work of told) work.findings.warning('no_zero', 'energy_invcm', 'No level of the species would lie at zero: energies are counted from the ground level.')
}

const sameTerm = (a: LevelRow, b: LevelRow): boolean => nameOf(a) === nameOf(b)

/** Whether a change does anything to where a level of this name lies. */
const unmoved = ({ row, before }: UnionLevel): boolean => before !== null && before.energyInvcm === row.energyInvcm && sameTerm(before, row)

function checkEnergies(levels: readonly UnionLevel[], species: SpeciesRow | undefined): void {
  const limit = species?.ionisationEnergyInvcm ?? null
  const lines = countMovedLines(levels)
  for (const level of levels) {
    const { row, before, work } = level
    if (work === null) continue
    if (limit !== null && row.energyInvcm > limit && !(before !== null && before.energyInvcm === row.energyInvcm)) {
      work.findings.warning('energy_above_ionisation', 'energy_invcm', `The energy lies above the ionisation energy ${limit} cm^-1: such a level decays by losing an electron.`)
    }
    if (before === null || before.energyInvcm === row.energyInvcm) continue
    const move = row.energyInvcm - before.energyInvcm
    const known = [before.energyUncInvcm, row.energyUncInvcm].filter((unc): unc is number => unc !== null && unc > 0)
    const sigma = known.length === 0 ? null : Math.hypot(...known)
    if (Math.abs(move) > (sigma === null ? TELLING_MOVE_INVCM : 3 * sigma)) {
      const by = sigma === null ? `more than ${TELLING_MOVE_INVCM} cm^-1, and no uncertainty is known` : `${(Math.abs(move) / sigma).toFixed(1)} standard deviations`
      work.findings.warning('energy_moved', 'energy_invcm', `The energy moves by ${Number(move.toPrecision(6))} cm^-1, which is ${by}.`)
    }
    if (lines === null) work.findings.warning('lines_moved', 'energy_invcm', 'Allowed lines of this level move; there are too many in the species to count them here.')
    else {
      const count = lines.get(level) ?? 0
      if (count > 0) work.findings.warning('lines_moved', 'energy_invcm', `${count === 1 ? 'One allowed line' : `${count} allowed lines`} of this level move${count === 1 ? 's' : ''} by more than three standard deviations, or ${TELLING_MOVE_INVCM} cm^-1 where none is known.`)
    }
  }
}

/** Interval E(J) - E(J - 1) divided by J: the same all over a term by Landé's interval rule. */
interface Interval { upper: UnionLevel; perJ: number }

function intervalsOf(term: readonly UnionLevel[]): Interval[][] {
  const sorted = [...term].sort((a, b) => a.row.twoJ - b.row.twoJ)
  const runs: Interval[][] = [[]]
  for (let at = 1; at < sorted.length; at += 1) {
    const [lower, upper] = [sorted[at - 1], sorted[at]]
    if (lower === undefined || upper === undefined) continue
    if (upper.row.twoJ - lower.row.twoJ !== 2) runs.push([])
    else runs.at(-1)?.push({ upper, perJ: (upper.row.energyInvcm - lower.row.energyInvcm) / (upper.row.twoJ / 2) })
  }
  return runs
}

/** Landé's interval rule (Condon & Shortley, ch. VII): in an LS term E(J) - E(J - 1) goes as J. */
function checkIntervals(levels: readonly UnionLevel[]): void {
  const terms = new Map<string, UnionLevel[]>()
  const touched = new Set<string>()
  for (const level of levels) {
    const { row } = level
    if (row.coupling !== 'LS' || row.twoS === 0 || row.l === 0) continue
    const name = [row.configuration, row.label ?? '', row.twoS, row.l, row.parity, row.repeatIndex ?? 0].join('|')
    const members = terms.get(name)
    if (members === undefined) terms.set(name, [level])
    else members.push(level)
    if (level.work !== null && !unmoved(level)) touched.add(name)
  }
  for (const name of touched) {
    const term = terms.get(name) ?? []
    for (const run of intervalsOf(term)) {
      for (let at = 1; at < run.length; at += 1) {
        const [first, second] = [run[at - 1], run[at]]
        if (first === undefined || second === undefined || Math.abs(second.perJ - first.perJ) <= 0.3 * Math.abs(first.perJ)) continue
        const ratio = first.perJ === 0 ? 'no ratio, the first being zero' : `${((second.perJ / first.perJ) * 100).toFixed(0)} % of the ratio of Landé's rule`
        for (const level of term) {
          if (level.work === null || unmoved(level)) continue
          level.work.findings.warning('interval_ratio', 'energy_invcm', `In this term the interval below J = ${formatHalf(second.upper.row.twoJ)} to that below J = ${formatHalf(first.upper.row.twoJ)} is ${ratio}, off by more than 30 %: look at the energies, or say why.`)
        }
      }
    }
  }
}

/** The checks that look at all levels of one species together, in time that goes as their number (lines moved: as moved times all). */
export function checkSpeciesLevels(species: SpeciesRow | undefined, levels: readonly UnionLevel[], works: readonly Work[]): void {
  checkTwins(levels)
  checkZero(levels, works)
  checkEnergies(levels, species)
  checkIntervals(levels)
}
