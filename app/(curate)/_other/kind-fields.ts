import type { ChangeKind } from '@/openapi/schemas/change'
import { EVIDENCE } from '../_sheet/columns'

export type OtherKind = Exclude<ChangeKind, 'level'>
export interface KindField { name: string; label: string; unit?: string; long?: boolean; choices?: readonly string[]; sources?: boolean; hint?: string }

const SOURCE: KindField = { name: 'source', label: 'Source', sources: true }
const GRADE: KindField = { name: 'evidence', label: 'Evidence', choices: EVIDENCE }
const NOTE: KindField = { name: 'note', label: 'Note', long: true }

export const KINDS: Record<OtherKind, { word: string; many: string; fields: readonly KindField[] }> = {
  source: {
    word: 'source', many: 'Sources',
    fields: [
      { name: 'citation', label: 'Reference in full', long: true }, { name: 'kind', label: 'Kind', choices: ['article', 'report', 'book', 'data sheet', 'abstract', 'other'] }, { name: 'authors', label: 'Authors' },
      { name: 'title', label: 'Title' }, { name: 'journal', label: 'Journal, volume and page' }, { name: 'year', label: 'Year' }, { name: 'doi', label: 'DOI' }, NOTE,
    ],
  },
  species: {
    word: 'species', many: 'Species',
    fields: [
      { name: 'name', label: 'Name', hint: 'sodium' }, { name: 'core_configuration', label: 'Core configuration', hint: '[Ne]' }, { name: 'ionisation_energy_invcm', label: 'Ionisation energy', unit: 'cm⁻¹' },
      { name: 'ionisation_source', label: 'Source of it', sources: true }, { name: 'ionisation_evidence', label: 'Evidence of it', choices: EVIDENCE }, NOTE,
    ],
  },
  isotope: {
    word: 'isotope', many: 'Isotopes',
    fields: [
      { name: 'mass_u', label: 'Mass', unit: 'u' }, { name: 'nuclear_spin', label: 'Nuclear spin', hint: '3/2' }, { name: 'abundance_percent', label: 'Abundance', unit: '%' },
      { name: 'g_i', label: 'Nuclear g', hint: 'in units of the Bohr magneton, negative for a positive moment' }, SOURCE, GRADE, NOTE,
    ],
  },
  hyperfine: {
    word: 'pair of hyperfine constants', many: 'Hyperfine constants',
    fields: [
      { name: 'a_mhz', label: 'A', unit: 'MHz' }, { name: 'a_unc_mhz', label: 'Uncertainty of A', unit: 'MHz' }, { name: 'b_mhz', label: 'B', unit: 'MHz' }, { name: 'b_unc_mhz', label: 'Uncertainty of B', unit: 'MHz' },
      SOURCE, GRADE, NOTE,
    ],
  },
}
export const OTHER_KINDS = Object.keys(KINDS) as OtherKind[]

export interface Named { species: string; level: string; source: string; mass: string }

/** What is wrong with the name of a subject, if anything. */
export function nameFault(kind: OtherKind, { species, level, source, mass }: Named): string | null {
  const wantsMass = kind === 'isotope' || kind === 'hyperfine'
  if (kind === 'source' && !/^[a-z0-9]+(-[a-z0-9]+)*$/.test(source)) return 'A key is of small letters, digits and hyphens, such as kramida-2019-zn.'
  if ((kind === 'species' || kind === 'isotope') && !/^[A-Z][a-z]?-[IVXLC]+$/.test(species)) return 'A species is written Na-I: the element and the Roman stage.'
  if (kind === 'hyperfine' && !/^[A-Z][a-z]?-[IVXLC]+\.[1-9]\d{0,6}$/.test(level)) return 'A level is written Na-I.3.'
  if (wantsMass && !(/^\d{1,3}$/.test(mass) && Number(mass) >= 1 && Number(mass) <= 400)) return 'The mass number is a whole number from 1 to 400.'
  return null
}
