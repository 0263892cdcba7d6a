import { coupledRange } from '@/lib/atomic/half'
import { ELEMENTS, toRoman } from '@/lib/atomic/elements'
import { termLetter } from '@/lib/atomic/letters'
import { buildSnapshot, type EditionContent, type Snapshot } from '@/lib/catalogue/snapshot'

/** A small generator of pseudo-random numbers in [0, 1) (mulberry32): the same seed, the same edition, on every machine. */
export function randomNumbers(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (state + 0x6d2b79f5) >>> 0
    let t = state
    t = Math.imul(t ^ (t >>> 15), t | 1)
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61)
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296
  }
}

const SHELLS = ['s', 'p', 'd', 'f', 'g']

interface Drawn { configuration: string; twoS: number; l: number; twoJ: number; parity: 'even' | 'odd' }

function draw(random: () => number, odd: boolean, n: number): Drawn {
  const whole = (below: number): number => Math.floor(random() * below)
  const parity = odd ? ('odd' as const) : ('even' as const)
  const outer = odd ? [1, 3][whole(2)] ?? 1 : [0, 2, 4][whole(3)] ?? 0
  const twoS = 2 * whole(4)
  const l = whole(6)
  const js = coupledRange(twoS, 2 * l)
  const parent = `(${whole(3) + 2}${termLetter(whole(4))})`
  return { configuration: `3d${whole(8) + 1}.${parent}.${n}${SHELLS[outer] ?? 's'}`, twoS, l, twoJ: js[whole(js.length)] ?? 0, parity }
}

/**
 * An invented edition of any size for measuring and for comparing with brute force: invented levels of invented species
 * (real elements' names, made-up values), energies spread evenly over 0 to 100 000 cm^-1. `degenerate` draws whole wavenumbers,
 * so that many intervals coincide.
 */
export function syntheticContent({ species, levels, seed = 1, degenerate = false, withoutLs = 0.1 }: { species: number; levels: number; seed?: number; degenerate?: boolean; withoutLs?: number }): EditionContent {
  const random = randomNumbers(seed)
  const ids = Array.from({ length: species }, (_, at) => {
    const element = ELEMENTS[at % 50]!
    const stage = Math.floor(at / 50) + 1
    return { id: `${element.symbol}-${toRoman(stage)}`, element, charge: stage - 1 }
  })
  return {
    edition: 1,
    species: ids.map(({ id, element, charge }) => ({
      id, element: element.symbol, z: element.z, stage: toRoman(charge + 1), charge, name: element.name, core_configuration: '',
      ionisation_energy_invcm: null, ionisation_source: null, ionisation_evidence: null, note: null, isotopes: [],
    })),
    levels: ids.flatMap(({ id }) =>
      Array.from({ length: levels }, (_, at) => {
        const drawn = draw(random, random() < 0.5, 4 + Math.floor(at / 20))
        const energy = at === 0 ? 0 : random() * 100_000
        const named = random() >= withoutLs
        return {
          speciesId: id,
          ordinal: at + 1,
          configuration: drawn.configuration,
          coupling: named ? ('LS' as const) : ('unassigned' as const),
          label: random() < 0.3 ? 'z' : null,
          twoS: named ? drawn.twoS : null,
          l: named ? drawn.l : null,
          twoJ: drawn.twoJ,
          twoK: null,
          coreTwoS: null,
          coreL: null,
          coreTwoJ: null,
          lOuter: null,
          twoJOuter: null,
          parity: drawn.parity,
          repeatIndex: at + 1,
          alternativeName: null,
          energyInvcm: degenerate ? Math.round(energy / 1000) * 10 : energy,
          energyUncInvcm: null,
          energyLiteral: null,
          energySource: 'invented',
          energyEvidence: 'computed' as const,
          lineChecked: false,
          note: random() < 0.02 ? 'an invented level' : null,
          status: 'active' as const,
          retiredReason: null,
          successor: null,
          publishedFrom: 1,
          revision: 1,
          gChosen: null,
          gChosenReason: null,
        }
      }),
    ),
    measuredG: [],
    hyperfine: [],
    sources: [{ key: 'invented', citation: 'Invented for measuring', kind: 'other', authors: null, title: null, journal: null, year: null, doi: null, note: null }],
  }
}

export const syntheticSnapshot = (size: Parameters<typeof syntheticContent>[0]): Snapshot => buildSnapshot(syntheticContent(size))
