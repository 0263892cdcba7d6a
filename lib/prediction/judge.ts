import { type Fault, faultsProblem } from '@/lib/problem'
import { inlineFaults, inlineLevel, type InlineLevelGiven } from '@/lib/prediction/inline'
import { lineFacts } from '@/lib/prediction/transition'
import type { Kind } from '@/openapi/schemas/common'
import type { JudgedTransition } from '@/openapi/schemas/transition'

/** Levels of equal energy, which no transition joins. */
export const intervalFaults = (lower: InlineLevelGiven, upper: InlineLevelGiven): Fault[] =>
  lower.energy_invcm === upper.energy_invcm ? [{ pointer: '/upper/energy_invcm', code: 'zero_interval', detail: 'The two levels have equal energies, so no transition joins them; give two different energies.' }] : []

/**
 * Judges two levels given in a request. The answer is canonical: the level of lower energy first, whichever name it was given by
 * (`exchanged` says so). Refuses with every fault at once: J that S and L cannot make, g_j of J = 0, equal energies.
 */
export function judgeInline(
  lower: InlineLevelGiven,
  upper: InlineLevelGiven,
  kind: Kind | null | undefined,
  gS: number | null,
): { transition: JudgedTransition; exchanged: boolean } {
  const faults: Fault[] = [...inlineFaults(lower, '/lower'), ...inlineFaults(upper, '/upper'), ...intervalFaults(lower, upper)]
  if (faults.length > 0) throw faultsProblem(faults)
  const exchanged = upper.energy_invcm < lower.energy_invcm
  const [low, high] = (exchanged ? [upper, lower] : [lower, upper]).map((level) => inlineLevel(level, gS)) as [ReturnType<typeof inlineLevel>, ReturnType<typeof inlineLevel>]
  return { transition: { id: null, lower: low, upper: high, ...lineFacts(low, high, kind ?? undefined) }, exchanged }
}
