import type { Table } from '@/openapi/core/table'
import type { Source } from '@/openapi/schemas/source'
import type { Species } from '@/openapi/schemas/species'
import { type Field, integer, number, tableOf, text } from '@/lib/prediction/tables/column'

const SPECIES_FIELDS: readonly Field<Species>[] = [
  text('id', 'Species', (s) => s.id),
  text('element', 'Symbol of the element', (s) => s.element),
  integer('z', 'Atomic number', (s) => s.z),
  text('stage', 'Roman stage', (s) => s.stage),
  integer('charge', 'Charge', (s) => s.charge),
  text('name', 'Name of the element', (s) => s.name),
  text('core_configuration', 'Closed shells that level configurations leave out', (s) => s.core_configuration),
  number('ionisation_energy_invcm', 'cm-1', 'Ionisation energy', (s) => s.ionisation_energy_invcm),
  text('ionisation_source', 'Source of the ionisation energy', (s) => s.ionisation_source),
  text('ionisation_evidence', 'How far the ionisation energy was checked', (s) => s.ionisation_evidence),
  integer('level_count', 'Active levels', (s) => s.level_count),
  integer('isotope_count', 'Isotopes listed', (s) => s.isotopes.length),
  number('isotope_abundance_sum_percent', '%', 'Sum over the isotopes listed', (s) => s.isotope_abundance_sum_percent),
  text('sources', 'Keys of the sources, with spaces between', (s) => s.sources.join(' ')),
  text('note', 'Note', (s) => s.note),
]

export const speciesTable = (species: Iterable<Species>): Table => tableOf('species', SPECIES_FIELDS, species)

const SOURCE_FIELDS: readonly Field<Source>[] = [
  text('key', 'Key', (s) => s.key),
  text('citation', 'The reference as it was given', (s) => s.citation),
  text('kind', 'Kind of publication', (s) => s.kind),
  text('authors', 'Authors', (s) => s.authors),
  text('title', 'Title', (s) => s.title),
  text('journal', 'Journal', (s) => s.journal),
  integer('year', 'Year', (s) => s.year),
  text('doi', 'DOI', (s) => s.doi),
  text('note', 'Note', (s) => s.note),
  integer('used_by_species', 'Ionisation energies that rest on it', (s) => s.used_by.species),
  integer('used_by_levels', 'Levels whose energy rests on it', (s) => s.used_by.levels),
  integer('used_by_measured_g', 'Measured g_J that rest on it', (s) => s.used_by.measured_g),
  integer('used_by_isotopes', 'Isotopes that rest on it', (s) => s.used_by.isotopes),
  integer('used_by_hyperfine_constants', 'Hyperfine constants that rest on it', (s) => s.used_by.hyperfine_constants),
]

export const sourceTable = (sources: Iterable<Source>): Table => tableOf('sources', SOURCE_FIELDS, sources)
