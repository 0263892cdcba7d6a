import fs from 'node:fs'
import path from 'node:path'

type Evidence = 'read' | 'quoted' | 'recalled' | 'computed'

export interface SourceSeed {
  key: string
  citation: string
  kind: 'article' | 'report' | 'book' | 'data sheet' | 'abstract' | 'other'
  authors: string | null
  title: string | null
  journal: string | null
  year: number | null
  doi: string | null
  note: string | null
}

/** A level as it is written in the data: momenta as text ("3/2"), the configuration as the source writes it, without the core. */
export interface LevelSeed {
  configuration: string
  coupling: 'LS' | 'J1K'
  label: string | null
  term: string
  j: string
  parity: 'even' | 'odd'
  s?: string
  l?: number
  k?: string
  core_s?: string
  core_l?: number
  core_j?: string
  l_outer?: number
  energy_invcm: number
  evidence: Evidence
  line_checked: boolean
  alternative_name?: string
  note?: string
}

export interface SpeciesSeed {
  id: string
  name: string
  z: number
  charge: number
  /** Closed shells that the levels leave out; empty for none. */
  core: string
  ionisation_energy_invcm: number
  source: string
  evidence: Evidence
  confidence: 'high' | 'medium' | 'low'
  isotope_source: string
  isotope_evidence: Evidence
  /** g_i: g_I' in units of mu_B, negative for a positive moment. */
  isotopes: { mass_number: number; mass_u: number; spin: string; abundance_percent: number; g_i?: number }[]
  /** In the order that numbers them: `Na-I.1` is the first. */
  levels: LevelSeed[]
}

export interface MeasuredGSeed {
  level: string
  value: number
  unc: number | null
  source: string
  evidence: Evidence
  note: string | null
}

export interface HyperfineSeed {
  level: string
  mass_number: number
  a_mhz: number | null
  a_unc_mhz: number | null
  b_mhz: number | null
  b_unc_mhz: number | null
  source: string
  evidence: Evidence
  note: string | null
}

export interface Seed {
  sources: SourceSeed[]
  species: SpeciesSeed[]
  measuredG: MeasuredGSeed[]
  hyperfine: HyperfineSeed[]
}

const folder = path.join(import.meta.dirname, 'data')
const read = (name: string): unknown => JSON.parse(fs.readFileSync(path.join(folder, name), 'utf8'))

/** The published data of the first edition, from the files beside this module; their shapes are held by the tests. */
export function readSeed(): Seed {
  const order = read('order.json') as string[]
  return {
    sources: read('sources.json') as SourceSeed[],
    species: order.map((id) => read(`species/${id}.json`) as SpeciesSeed),
    measuredG: read('measured-g.json') as MeasuredGSeed[],
    hyperfine: read('hyperfine.json') as HyperfineSeed[],
  }
}
