import type { Table } from '@/openapi/core/table'
import type { HyperfineSublevel, Level, Sublevel } from '@/openapi/schemas/level'
import { flag, type Field, integer, number, tableOf, text } from '@/lib/prediction/tables/column'

const INVCM = 'cm-1'

const TERM: readonly Field<Level>[] = [
  text('term', 'Term symbol with J; * marks odd parity', (l) => l.term.symbol),
  text('label', 'Letter before a repeated term; not part of the symbol', (l) => l.term.label),
  integer('multiplicity', '2S + 1', (l) => l.term.multiplicity),
  number('s', null, 'Total spin S', (l) => l.term.s),
  integer('l', 'Total orbital angular momentum L', (l) => l.term.l),
  number('k', null, 'K of a pair-coupled level', (l) => l.term.k),
  number('core_s', null, 'S of the core, pair and jj coupling', (l) => l.term.core?.s),
  integer('core_l', 'L of the core, pair and jj coupling', (l) => l.term.core?.l),
  number('core_j', null, 'J of the core, pair and jj coupling', (l) => l.term.core?.j),
  integer('l_outer', 'l of the outer electron, pair and jj coupling', (l) => l.term.l_outer),
  number('j_outer', null, 'j of the outer electron, jj coupling', (l) => l.term.j_outer),
  number('j', null, 'Total angular momentum J', (l) => l.term.j),
  text('parity', 'even or odd', (l) => l.term.parity),
  integer('degeneracy', '2J + 1', (l) => l.term.degeneracy),
]

const G: readonly Field<Level>[] = [
  number('g_j', null, 'Adopted g_J', (l) => l.g_j.adopted),
  number('g_j_unc', null, 'One standard deviation of the adopted g_J', (l) => l.g_j.adopted_unc),
  text('g_j_basis', 'Where the adopted g_J comes from: chosen, measured, coupled or none', (l) => l.g_j.basis),
  text('g_j_status', 'ok, unknown or not_applicable (J = 0)', (l) => l.g_j.status),
  number('g_j_coupled', null, 'g_J in the stated coupling with the CODATA g_s', (l) => l.g_j.coupled),
  text('g_j_coupled_exact', 'g_J in the stated coupling at g_s = 2', (l) => l.g_j.coupled_exact),
  number('g_j_measured', null, 'Measured g_J that speaks first', (l) => l.g_j.measured),
  number('g_j_measured_unc', null, 'One standard deviation of the measured g_J', (l) => l.g_j.measured_unc),
  text('g_source', 'Source of the measured g_J', (l) => l.g_j.measured_source),
  text('g_evidence', 'How far the measured g_J was checked', (l) => l.g_j.measured_evidence),
]

export const LEVEL_FIELDS: readonly Field<Level>[] = [
  text('id', 'Level', (l) => l.id),
  text('species', 'Species', (l) => l.species),
  text('configuration', 'Configuration with parents', (l) => l.configuration),
  text('coupling', 'Coupling scheme', (l) => l.coupling),
  ...TERM,
  number('energy_invcm', INVCM, 'Energy above the ground level', (l) => l.energy_invcm),
  number('energy_unc_invcm', INVCM, 'One standard deviation of the energy', (l) => l.energy_unc_invcm),
  text('energy_literal', "The source's own digits", (l) => l.energy_literal),
  text('energy_source', 'Source of the energy', (l) => l.energy_source),
  text('energy_evidence', 'How far the energy was checked', (l) => l.energy_evidence),
  ...G,
  flag('line_checked', 'A well-known wavelength is reproduced to 0.01 nm with this level', (l) => l.line_checked),
  integer('repeat_index', 'Tells levels apart where even configuration, label, term and J repeat', (l) => l.repeat_index),
  text('alternative_name', 'Paschen name', (l) => l.alternative_name),
  text('note', 'Note', (l) => l.note),
  text('status', 'active or retired', (l) => l.status),
  integer('revision', 'Number of the revision', (l) => l.revision),
]

/** One row a level, every value of it that has one place; several measured g_J stand in JSON and NDJSON only. */
export const levelTable = (levels: Iterable<Level>, name = 'levels'): Table => tableOf(name, LEVEL_FIELDS, levels)

const SUBLEVEL_FIELDS: readonly Field<Sublevel>[] = [
  number('j', null, 'J by continuity from zero field', (s) => s.j),
  number('m', null, 'Magnetic quantum number', (s) => s.m),
  number('m_l', null, 'M_L at high field', (s) => s.m_l),
  number('m_s', null, 'M_S at high field', (s) => s.m_s),
  number('shift_invcm', INVCM, 'Energy minus that of the level without field', (s) => s.shift_invcm),
  number('shift_ghz', 'GHz', 'The same in frequency', (s) => s.shift_ghz),
  number('shift_mhz', 'MHz', 'The same in MHz', (s) => s.shift_mhz),
  number('energy_invcm', INVCM, 'Energy above the ground level', (s) => s.energy_invcm),
  number('derivative_invcm_per_tesla', 'cm-1 / T', 'Change of the energy with the field', (s) => s.derivative_invcm_per_tesla),
  number('diamagnetic_shift_invcm', INVCM, 'Quadratic shift; part of the energy with diamagnetic=true only', (s) => s.diamagnetic_shift_invcm),
]

export const sublevelTable = (sublevels: Iterable<Sublevel>): Table => tableOf('sublevels', SUBLEVEL_FIELDS, sublevels)

const HYPERFINE_SUBLEVEL_FIELDS: readonly Field<HyperfineSublevel>[] = [
  integer('mass_number', 'Isotope', (s) => s.mass_number),
  number('f', null, 'F by continuity from zero field', (s) => s.f),
  number('m_f', null, 'm_F', (s) => s.m_f),
  number('m_j', null, 'm_J at high field', (s) => s.m_j),
  number('m_i', null, 'm_I at high field', (s) => s.m_i),
  number('shift_mhz', 'MHz', 'Energy minus that of the hyperfine level F without field', (s) => s.shift_mhz),
  number('energy_mhz', 'MHz', 'Energy from the centre of gravity of the level J', (s) => s.energy_mhz),
  number('energy_invcm', INVCM, 'Energy above the ground level', (s) => s.energy_invcm),
  number('derivative_mhz_per_tesla', 'MHz / T', 'Change of the energy with the field', (s) => s.derivative_mhz_per_tesla),
]

export const hyperfineSublevelTable = (sublevels: Iterable<HyperfineSublevel>): Table => tableOf('hyperfine-sublevels', HYPERFINE_SUBLEVEL_FIELDS, sublevels)
