import type { Level } from '@/openapi/schemas/level'
import { formatHalf } from '@/lib/atomic/half'
import { termLetter } from '@/lib/atomic/letters'
import type { Values } from './change-state'

const half = (value: number): string => formatHalf(Math.round(2 * value))

/** The core's term as a change writes it: its parity is the level's, turned round by an outer electron of odd l. */
function coreText({ core, l_outer: lOuter, parity }: Level['term']): string | null {
  if (core === undefined) return null
  const odd = (parity === 'odd') !== ((lOuter ?? 0) % 2 === 1)
  return `${Math.round(2 * core.s) + 1}${termLetter(core.l)}${odd ? '*' : ''}${half(core.j)}`
}

/**
 * The values of a published level as its row shows them. What the list of levels does not tell (digits of measured g_J, the reason of
 * a chosen one) is read before a change is written: `complete` says whether anything can be missing.
 */
export function valuesOfLevel(level: Level): { values: Values; complete: boolean } {
  const { term, g_j: g } = level
  const unassigned = level.coupling === 'unassigned'
  return {
    values: {
      configuration: level.configuration,
      coupling: level.coupling,
      term: unassigned && !/^J=/.test(term.symbol) ? `J=${half(term.j)}${term.parity === 'odd' ? '*' : ''}` : `${term.label ?? ''}${term.symbol}`,
      core: coreText(term),
      l_outer: term.l_outer ?? null,
      repeat_index: level.repeat_index,
      alternative_name: level.alternative_name,
      energy_literal: level.energy_literal,
      energy_invcm: level.energy_invcm,
      energy_unc_invcm: level.energy_unc_invcm,
      energy_source: level.energy_source,
      energy_evidence: level.energy_evidence,
      measured_g: g.all_measured.map(({ value, unc, source, evidence, note }) => ({ value, unc, source, evidence, note })),
      g_j_chosen: g.basis === 'chosen' ? g.adopted : null,
      line_checked: level.line_checked,
      note: level.note,
    },
    complete: false,
  }
}
