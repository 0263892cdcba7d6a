import type { ImportColumn } from '@/openapi/schemas/import'

/**
 * The columns that an import reads: those of an export of levels, with units in their names, and what a curator needs beside them.
 * - text, number, half (3/2 or 1.5), flag: values of a level
 * - control: says again what the term says; the two must agree
 * - computed: made by the table from the values; left out
 */
export type ColumnKind = 'text' | 'number' | 'half' | 'flag'
export type ColumnUse = 'value' | 'control' | 'computed'

export interface OwnColumn extends ImportColumn { kind: ColumnKind; use: ColumnUse; words: readonly string[] }

const INVCM = 'cm-1'

interface More { unit?: string; required?: boolean; use?: ColumnUse; words?: readonly string[] }
const column = (kind: ColumnKind) => (name: string, description: string, { unit, required = false, use = 'value', words = [] }: More = {}): OwnColumn => ({ name, unit: unit ?? null, required, description, kind, use, words })
const text = column('text')
const number = column('number')
const half = column('half')
const flag = column('flag')

const control = { use: 'control' } as const
const computed = { use: 'computed' } as const

/** In the order of the export. `words` are what other tables call the same thing, in small letters without marks. */
export const COLUMNS: readonly OwnColumn[] = [
  text('id', 'Level of the table that the row is about, such as Na-I.3. Left empty, the level is found by its other values.', { words: ['level id', 'identifier'] }),
  text('species', 'Species, such as Na-I; Na I with a space is read as the same.', { required: true, words: ['ion', 'spectrum', 'atom', 'element', 'spectrum name', 'sp'] }),
  text('configuration', 'Configuration with parents, such as 3d6.(5D).4s.4p.(3P*).', { required: true, words: ['config', 'conf', 'electron configuration'] }),
  text('coupling', 'LS, J1K, jj or unassigned. Found from the term where it is left out.', { words: ['coupling scheme', 'scheme'] }),
  text('term', 'Term symbol, with J or beside a column j: 2P*3/2, or 2P*.', { required: true, words: ['term symbol', 'level term'] }),
  text('label', 'Letter before a repeated term.', { words: ['term label', 'prefix'] }),
  number('multiplicity', '2S + 1: must agree with the term.', { ...control, words: ['mult'] }),
  half('s', 'S: must agree with the term.', control),
  number('l', 'L: must agree with the term.', control),
  half('k', 'K of a pair-coupled level: must agree with the term.', control),
  half('core_s', 'S of the core, pair and jj coupling.'),
  number('core_l', 'L of the core, pair and jj coupling.'),
  half('core_j', 'J of the core, pair and jj coupling.'),
  number('l_outer', 'l of the outer electron, pair and jj coupling.'),
  half('j_outer', 'j of the outer electron, jj coupling: must agree with the term.', control),
  half('j', 'J, as 3/2 or 1.5: needed where the term has none, else it must agree.', { words: ['j value', 'tot j'] }),
  text('parity', 'even or odd: needed where the term has no mark for it, else it must agree.', { words: ['p', 'pi'] }),
  number('degeneracy', '2J + 1: must agree with the term.', { ...control, words: ['g', 'weight', 'statistical weight', '2j+1'] }),
  number('energy_invcm', 'Energy above the ground level. Read from energy_literal where that is given alone.', { unit: INVCM, required: true, words: ['energy', 'level', 'e', 'level energy', 'energy level', 'wavenumber', 'term value', 'excitation energy'] }),
  number('energy_unc_invcm', 'One standard deviation of the energy; empty is unknown.', { unit: INVCM, words: ['uncertainty', 'unc', 'error', 'energy uncertainty', 'sigma', 'd energy', 'level uncertainty'] }),
  text('energy_literal', 'The digits that the source printed.', { words: ['printed energy', 'energy as printed', 'digits'] }),
  text('energy_source', 'Key of the source of the energy.', { words: ['source', 'reference', 'ref', 'bibliography', 'refs'] }),
  text('energy_evidence', 'How far the energy was checked against its source: read, quoted, recalled or computed.', { words: ['evidence'] }),
  number('g_j', 'Adopted g_J.', computed),
  number('g_j_unc', 'Uncertainty of the adopted g_J.', computed),
  text('g_j_basis', 'Where the adopted g_J comes from.', computed),
  text('g_j_status', 'Whether there is a g_J.', computed),
  number('g_j_coupled', 'g_J in the stated coupling.', computed),
  text('g_j_coupled_exact', 'The same at g_s = 2.', computed),
  number('g_j_measured', 'Measured g_J. Of several that a level has, the one that speaks first; the others stay as they are.', { words: ['lande', 'lande factor', 'lande g', 'gj', 'g factor', 'g obs', 'lande gj'] }),
  number('g_j_measured_unc', 'One standard deviation of the measured g_J; empty is unknown.', { words: ['g uncertainty', 'lande uncertainty', 'gj unc'] }),
  text('g_source', 'Key of the source of the measured g_J.', { words: ['lande source', 'g reference'] }),
  text('g_evidence', 'How far the measured g_J was checked against its source.'),
  number('g_j_chosen', 'A g_J that goes before measured and coupled ones.'),
  text('g_j_chosen_reason', 'Why it does.'),
  flag('line_checked', 'true where a well-known wavelength is reproduced with this level.'),
  number('repeat_index', 'Tells levels apart where even configuration, label, term and J repeat: 1, 2, ...', { words: ['repeat', 'index'] }),
  text('alternative_name', 'A second name in use, such as 1s5 of Paschen.', { words: ['paschen', 'paschen name', 'designation', 'name'] }),
  text('note', 'Note.', { words: ['notes', 'remark', 'remarks', 'comment', 'comments'] }),
  text('status', 'active or retired: must agree with the table; a level is retired by a change of its own, with a reason.', control),
  number('revision', 'Revision of the level that the row was made from: one that is older than the table is refused where the row says otherwise.', control),
]

const byName = new Map(COLUMNS.map((one) => [one.name, one]))
export const ownColumn = (name: string): OwnColumn | undefined => byName.get(name)

/** Columns of which a file without `id` needs all; an energy may come as its literal alone. */
export const REQUIRED: readonly string[] = COLUMNS.filter((one) => one.required).map((one) => one.name)

/** What `GET /import-columns` shows: everything that is read. */
export const importColumns = (): ImportColumn[] => COLUMNS.filter((one) => one.use !== 'computed').map(({ name, unit, required, description }) => ({ name, unit, required, description }))
