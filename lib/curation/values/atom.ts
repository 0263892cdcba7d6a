import { checkConfiguration, type Configuration, highestSpin, parityOf, parseConfiguration, parseConfigurationOf, printConfiguration } from '@/lib/atomic/configuration'
import type { Parity } from '@/openapi/schemas/common'
import type { SpeciesRow } from '../rows'

/** What of a species its levels are read against. */
export interface Atom { id: string; z: number; charge: number; core: string }

export const atomOf = (id: string, species: Pick<SpeciesRow, 'z' | 'charge' | 'coreConfiguration'>): Atom => ({ id, z: species.z, charge: species.charge, core: species.coreConfiguration })

/** A configuration read for an atom, with all that checks ask of it. */
export interface ReadConfiguration {
  configuration: Configuration
  canonical: string
  parity: Parity
  /** Twice the largest spin of its open shells. */
  twoSMax: number
  /** What is wrong with the number of electrons; null where it is right, or the atom is not known. */
  electrons: string | null
}

type Reading = { ok: true; value: ReadConfiguration } | { ok: false; code: string; detail: string }

/** Few texts come back in a hundred thousand rows: each is read once. */
const REMEMBERED = 20_000
const readings = new Map<string, Reading>()
const cores = new Map<string, Configuration | null>()

/** A species' core as a configuration; null where it has none, or it cannot be read (which is the species' own error). */
export function coreOf(text: string): Configuration | null {
  const known = cores.get(text)
  if (known !== undefined) return known
  const read = text === '' ? null : parseConfiguration(text)
  const core = read !== null && read.ok ? read.value : null
  if (cores.size >= REMEMBERED) cores.clear()
  cores.set(text, core)
  return core
}

function read(text: string, atom: Atom | null): Reading {
  const ion = atom === null ? null : { core: coreOf(atom.core), z: atom.z, charge: atom.charge }
  const parsed = ion === null ? parseConfiguration(text) : parseConfigurationOf(text, ion)
  if (!parsed.ok) return parsed
  const configuration = parsed.value
  const [wrong] = ion === null ? [] : checkConfiguration(configuration, ion)
  return { ok: true, value: { configuration, canonical: printConfiguration(configuration), parity: parityOf(configuration), twoSMax: highestSpin(configuration), electrons: wrong?.detail ?? null } }
}

/** Reads a configuration for an atom, remembering it by its text. */
export function readConfiguration(text: string, atom: Atom | null): Reading {
  const key = atom === null ? `?|${text}` : `${atom.z}/${atom.charge}/${atom.core}|${text}`
  const known = readings.get(key)
  if (known !== undefined) return known
  const made = read(text, atom)
  if (readings.size >= REMEMBERED) readings.clear()
  readings.set(key, made)
  return made
}
