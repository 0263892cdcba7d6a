import { parseHalf } from '@/lib/atomic/half'
import { landeG, landeGExact, pairG, pairGExact } from '@/lib/atomic/lande'
import { parseTerm } from '@/lib/atomic/term'
import { readData } from './read'

/** A level of the reference list, `data/levels.json`. */
export interface ListedLevel {
  configuration: string
  term: string
  coupling: 'LS' | 'J1K'
  parity: 'even' | 'odd'
  J: string
  S: string | null
  L: number | null
  K?: string
  core_J?: string
  core_S?: string
  core_L?: number
  l_outer?: number
  energy_invcm: number
}

export interface ListedSpecies {
  species: string
  Z: number
  charge: number
  levels: ListedLevel[]
}

export const listed = readData<{ rows: ListedSpecies[] }>('levels.json').rows

/** The closed inner shells that the list leaves out of its configurations. */
export const CORES: Record<string, string> = {
  'H I': '', 'He I': '', 'Li I': '[He]', 'Na I': '[Ne]', 'K I': '[Ar]', 'Rb I': '[Kr]', 'Cs I': '[Xe]', 'Mg I': '[Ne]', 'Mg II': '[Ne]',
  'Ca I': '[Ar]', 'Ca II': '[Ar]', 'Sr I': '[Kr]', 'Sr II': '[Kr]', 'Ba I': '[Xe]', 'Ba II': '[Xe]', 'Zn I': '[Ar].3d10', 'Cd I': '[Kr].4d10',
  'Hg I': '[Xe].4f14.5d10', 'Ne I': '1s2.2s2', 'Ar I': '[Ne].3s2', 'Ar II': '[Ne].3s2', 'C II': '[He]', 'C III': '[He]', 'O I': '1s2.2s2',
  'N II': '1s2.2s2', 'Fe I': '[Ar]', 'Cr I': '[Ar]', 'Si I': '[Ne].3s2', 'Ti I': '[Ar]', 'Mn I': '[Ar]', 'Al I': '[Ne]', 'Kr I': '[Ar].3d10.4s2', 'Xe II': '[Kr].4d10.5s2',
}

export function two(text: string | null | undefined): number {
  const read = parseHalf(text ?? '')
  if (!read.ok) throw new Error(read.detail)
  return read.value
}

/** g in the level's own coupling, real and exact. */
export function gOf(level: ListedLevel, gS?: number): { g: number | null; exact: string | null } {
  const options = gS === undefined ? {} : { gS }
  if (level.coupling === 'LS') {
    const numbers = { twoS: two(level.S), l: level.L ?? 0, twoJ: two(level.J) }
    return { g: landeG(numbers, options), exact: landeGExact(numbers) }
  }
  const pair = {
    core: { twoS: two(level.core_S), l: level.core_L ?? 0, twoJ: two(level.core_J) },
    lOuter: level.l_outer ?? 0,
    twoK: two(level.K),
    twoJ: two(level.J),
  }
  return { g: pairG(pair, gS), exact: pairGExact(pair) }
}

/** Finds a level of a species by configuration, term (label too) and J, or throws. */
export function findLevel(species: string, configuration: string, term: string, j: string): ListedLevel {
  const level = listed.find((row) => row.species === species)?.levels.find((row) => row.configuration === configuration && row.term === term && row.J === j)
  if (!level) throw new Error(`no level ${species} ${configuration} ${term} ${j} in the list`)
  return level
}

/** The term of a row as the parser reads it, or throws. */
export function termOf(level: ListedLevel) {
  const read = parseTerm(level.term)
  if (!read.ok) throw new Error(read.detail)
  return read.value
}
