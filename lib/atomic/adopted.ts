/** How well a number is vouched for, best first: read in the publication, quoted from a text that quotes it, computed, recalled from memory. */
export const EVIDENCE_ORDER = ['read', 'quoted', 'computed', 'recalled'] as const

export interface MeasuredG {
  value: number
  /** One standard deviation; null when not known. */
  unc: number | null
  evidence: string
}

export interface GWarning {
  code: 'g_unc_unknown'
  detail: string
}

export interface AdoptedG<M extends MeasuredG> {
  adopted: number | null
  basis: 'measured' | 'coupled' | 'none'
  /** The measured value that speaks for the level (best evidence, then smallest uncertainty), adopted or not; null without any. */
  chosen: M | null
  /** The sentence that says why this one. */
  reason: string
  byCurator: boolean
  warnings: GWarning[]
}

/** A measured value at most this uncertain tells more than a coupled one. */
const FINE_UNCERTAINTY = 0.001
/** A measured value of unknown uncertainty tells more where it differs by more than this. */
const TELLING_DIFFERENCE = 0.002

const rank = (evidence: string): number => {
  const place = (EVIDENCE_ORDER as readonly string[]).indexOf(evidence)
  return place < 0 ? EVIDENCE_ORDER.length : place
}

/** Best evidence first, then smallest uncertainty, an unknown one last; equal ones keep their order. */
export const orderMeasured = <M extends MeasuredG>(measured: readonly M[]): M[] =>
  [...measured].sort((a, b) => rank(a.evidence) - rank(b.evidence) || (a.unc ?? Number.POSITIVE_INFINITY) - (b.unc ?? Number.POSITIVE_INFINITY) || 0)

/** How many standard deviations a measured value stands from the coupled one, signed; null where the deviation is unknown or 0. */
export function deviations(measured: MeasuredG, coupled: number | null): number | null {
  if (coupled === null || measured.unc === null || !(measured.unc > 0)) return null
  return (measured.value - coupled) / measured.unc
}

/** Whether a measured g differs from the coupled one by more than 2 %: worth a look, and common in pair-coupled neon. */
export const farFromCoupled = (measured: number, coupled: number | null): boolean => coupled !== null && Math.abs(measured - coupled) > 0.02 * Math.abs(coupled)

/** Whether a measured g differs from the LS one by more than 0.5 %: the term is then not pure. */
export const termNotPure = (measured: number, ls: number | null): boolean => ls !== null && Math.abs(measured - ls) > 0.005 * Math.abs(ls)

function telling(measured: MeasuredG, coupled: number): string | null {
  const difference = Math.abs(measured.value - coupled)
  if (measured.unc === null) return difference > TELLING_DIFFERENCE ? `the measured value, of unknown uncertainty, differs from the coupled one by more than ${TELLING_DIFFERENCE}` : null
  if (measured.unc <= FINE_UNCERTAINTY) return `the measured value's standard deviation is at most ${FINE_UNCERTAINTY}`
  return difference > 2 * measured.unc ? 'the measured value differs from the coupled one by more than two standard deviations' : null
}

const unknownUncertainty = (measured: MeasuredG): GWarning[] =>
  measured.unc === null ? [{ code: 'g_unc_unknown', detail: `The measured g_J ${measured.value} is used, and its uncertainty is not known.` }] : []

/** Why a measured value does not displace the coupled one. */
const tellsNoMore = (measured: MeasuredG, coupled: number): string =>
  measured.unc === null
    ? `the measured value has no stated uncertainty and is within 0.002 of the coupled one (${Math.abs(measured.value - coupled).toPrecision(2)} away)`
    : `the measured value, known to ${measured.unc}, agrees with the coupled one and is less certain than 0.001`

/**
 * The g_J to compute with: what a curator chose; else the measured value where it tells more than the coupled one (standard deviation
 * at most 0.001, or more than two of them away; of unknown uncertainty: more than 0.002 away); else the coupled one; else the measured one.
 */
export function adoptG<M extends MeasuredG>(input: {
  coupled: number | null
  measured: readonly M[]
  curator?: { value: number; reason: string } | null
}): AdoptedG<M> {
  const { coupled, curator } = input
  const chosen = orderMeasured(input.measured)[0] ?? null
  if (curator) {
    const basis = coupled !== null && curator.value === coupled ? 'coupled' : 'measured'
    const same = input.measured.find((row) => row.value === curator.value)
    return { adopted: curator.value, basis, chosen, reason: curator.reason, byCurator: true, warnings: same ? unknownUncertainty(same) : [] }
  }
  if (chosen === null) {
    const reason = coupled === null ? 'no coupling gives a g_J and none is measured' : 'no measured value'
    return { adopted: coupled, basis: coupled === null ? 'none' : 'coupled', chosen, reason, byCurator: false, warnings: [] }
  }
  const why = coupled === null ? 'the coupling gives no g_J' : telling(chosen, coupled)
  if (why === null) {
    return { adopted: coupled, basis: 'coupled', chosen, reason: tellsNoMore(chosen, coupled ?? 0), byCurator: false, warnings: [] }
  }
  return { adopted: chosen.value, basis: 'measured', chosen, reason: why, byCurator: false, warnings: unknownUncertainty(chosen) }
}
