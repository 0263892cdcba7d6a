import { z } from 'zod'
import { checkRequest } from '@/openapi/core/change-request'
import { Coupling, Evidence, LevelId, SpeciesId, TransitionId } from './common'
import { Instant } from './session'

/**
 * Values as a curator writes them. Numbers may come as text and are kept as they were written even where they cannot be read: the
 * check says what is wrong, so that a half-typed draft loses nothing.
 */
const number = z.union([z.number(), z.string().max(60)]).nullish()
const text = z.string().max(2000).nullish()
const short = z.string().max(200).nullish()
const evidence = z.string().max(20).nullish().meta({ description: `How far the value was checked: ${Evidence.options.join(', ')}.` })
const sourceKey = z.string().max(200).nullish().meta({ description: 'Key of a source.' })

export const MeasuredGValues = z
  .strictObject({ value: number, unc: number, literal: short, source: sourceKey, evidence, note: text })
  .meta({ id: 'MeasuredGValues', description: 'One measured g_J.' })
export type MeasuredGValues = z.infer<typeof MeasuredGValues>

export const LevelValues = z
  .strictObject({
    configuration: short,
    coupling: z.string().max(20).nullish().meta({ description: `Coupling the level is named in: ${Coupling.options.join(', ')}. LS where it is left out.` }),
    term: short.meta({ description: 'Term symbol with J, label before it where there is one: 2P*3/2, z5P*2, 2[3/2]*2, (1/2,3/2)*2; J=3/2* for an unassigned level.', example: '2P*3/2' }),
    core: short.meta({ description: 'J1K and jj coupling: the term of the core with its J.', example: '2P*3/2' }),
    l_outer: number.meta({ description: 'J1K and jj coupling: l of the outer electron.' }),
    repeat_index: number,
    alternative_name: short,
    energy_literal: short.meta({ description: 'The digits the source printed.' }),
    energy_invcm: number.meta({ description: 'Energy above the ground level; read from energy_literal where that is given alone.' }),
    energy_unc_invcm: number.meta({ description: 'One standard deviation; null is unknown.' }),
    energy_source: sourceKey,
    energy_evidence: evidence,
    g_j_measured: number.meta({ description: 'For a level with one measured g_J; measured_g takes several.' }),
    g_j_measured_unc: number,
    g_source: sourceKey,
    g_evidence: evidence,
    measured_g: z.array(MeasuredGValues).max(50).nullish().meta({ description: 'All measured g_J of the level.' }),
    g_j_chosen: number.meta({ description: 'A g_J that goes before measured and coupled ones, with the reason.' }),
    g_j_chosen_reason: text,
    line_checked: z.boolean().nullish(),
    note: text,
  })
  .meta({ id: 'LevelValues', description: 'All values of a level: a change replaces the whole row, and what is left out is empty afterwards.' })
export type LevelValues = z.infer<typeof LevelValues>

export const SourceValues = z
  .strictObject({ citation: text, kind: short, authors: text, title: text, journal: short, year: number, doi: short, note: text })
  .meta({ id: 'SourceValues' })
export type SourceValues = z.infer<typeof SourceValues>

export const SpeciesValues = z
  .strictObject({ name: short, core_configuration: short, ionisation_energy_invcm: number, ionisation_source: sourceKey, ionisation_evidence: evidence, note: text })
  .meta({ id: 'SpeciesValues', description: 'Element, nuclear charge and charge follow from the identifier.' })
export type SpeciesValues = z.infer<typeof SpeciesValues>

export const IsotopeValues = z
  .strictObject({ mass_u: number, nuclear_spin: number.meta({ description: '3/2 or 1.5.' }), abundance_percent: number, g_i: number.meta({ description: 'In units of mu_B, negative for a positive moment.' }), source: sourceKey, evidence, note: text })
  .meta({ id: 'IsotopeValues' })
export type IsotopeValues = z.infer<typeof IsotopeValues>

export const HyperfineValues = z
  .strictObject({ a_mhz: number, a_unc_mhz: number, b_mhz: number, b_unc_mhz: number, source: sourceKey, evidence, note: text })
  .meta({ id: 'HyperfineValues' })
export type HyperfineValues = z.infer<typeof HyperfineValues>

export const ChangeKind = z.enum(['level', 'source', 'species', 'isotope', 'hyperfine']).meta({ id: 'ChangeKind' })
export type ChangeKind = z.infer<typeof ChangeKind>
export const ChangeAction = z.enum(['create', 'replace', 'retire']).meta({ id: 'ChangeAction' })
export type ChangeAction = z.infer<typeof ChangeAction>

export const VALUES = { level: LevelValues, source: SourceValues, species: SpeciesValues, isotope: IsotopeValues, hyperfine: HyperfineValues } as const
export type Values = LevelValues | SourceValues | SpeciesValues | IsotopeValues | HyperfineValues
const AnyValues = z.union([LevelValues, SourceValues, SpeciesValues, IsotopeValues, HyperfineValues])

const REQUEST = {
  kind: ChangeKind.optional().meta({ description: 'level where it is left out.' }),
  action: ChangeAction,
  species: SpeciesId.optional(),
  level: LevelId.optional(),
  source: z.string().regex(/^[a-z0-9]+(-[a-z0-9]+)*$/, 'the key of a source, small letters, digits and hyphens such as kramida-2019-zn').max(100).optional().meta({ description: 'Key of the source: small letters, digits, hyphens.', example: 'kramida-2019-zn' }),
  mass_number: z.int().min(1).max(400).optional(),
  values: z.record(z.string(), z.unknown()).optional().meta({ description: 'LevelValues, SourceValues, SpeciesValues, IsotopeValues or HyperfineValues, by kind. Not for retire.' }),
  reason: text.meta({ description: 'Why; a level is retired with a reason.' }),
  successor: LevelId.nullish().meta({ description: 'The level that takes the place of a retired one.' }),
  comment: text.meta({ description: 'Why a warning is no ground to hold the change back.' }),
  base_revision: z.int().min(1).nullable().optional().meta({ description: 'Revision of the subject that the values were made from; null: made when it was not in the table. Where it is not the one in force nothing is written. Left out: the one in force for a new change, and the one stored for an edit; to state the one in force brings an edited change up to date.' }),
}

/** Which members name the subject: level {species} to create and {level} else; source {source}; species {species}; isotope {species, mass_number}; hyperfine {level, mass_number}. */
export const ChangeRequest = z
  .strictObject(REQUEST)
  .superRefine((request, context) => checkRequest(request, VALUES, context))
  .meta({ id: 'ChangeRequest', example: { action: 'replace', level: 'Na-I.3', values: { configuration: '3p', coupling: 'LS', term: '2P*3/2', energy_literal: '16973.36619', energy_unc_invcm: null, energy_source: 'sansonetti-2008-na', energy_evidence: 'quoted' }, comment: 'Digits checked against the printed table.' } })
export type ChangeRequest = z.infer<typeof ChangeRequest>

export const Finding = z
  .strictObject({
    severity: z.enum(['error', 'warning']).meta({ description: 'An error blocks submission; a warning wants a comment.' }),
    code: z.string().meta({ description: 'What was found. Warnings: energy_moved, lines_moved, energy_above_ionisation, interval_ratio, g_far_from_coupled, digits_beyond_uncertainty, no_zero, values_dropped; everything else is an error.', example: 'energy_moved' }),
    field: z.string().nullable().meta({ description: 'Name of the value it is about; null for the change as a whole.' }),
    detail: z.string(),
  })
  .meta({ id: 'Finding' })
export type Finding = z.infer<typeof Finding>

export const FieldDifference = z.strictObject({ field: z.string(), before: z.unknown(), after: z.unknown() }).meta({ id: 'FieldDifference' })
export type FieldDifference = z.infer<typeof FieldDifference>

/** What a change does to one line. */
export const LineConsequence = z
  .strictObject({
    transition: TransitionId,
    kind: z.enum(['E1', 'M1', 'E2']),
    effect: z.enum(['moved', 'g_changed', 'new', 'gone']).meta({ description: 'moved: its position changes (and perhaps its g_eff).' }),
    wavenumber_before_invcm: z.number().nullable(),
    wavenumber_after_invcm: z.number().nullable(),
    shift_invcm: z.number().nullable().meta({ description: 'After minus before.' }),
    wavelength_before_nm: z.number().nullable().meta({ description: 'Conventional: air from 200 to 2000 nm, vacuum outside.' }),
    wavelength_after_nm: z.number().nullable(),
    medium_before: z.enum(['air', 'vacuum']).nullable().meta({ description: 'What wavelength_before_nm is in.' }),
    medium_after: z.enum(['air', 'vacuum']).nullable().meta({ description: 'What wavelength_after_nm is in.' }),
    shift_pm: z.number().nullable().meta({ description: 'After minus before, of vacuum wavelengths where the medium differs.' }),
    g_eff_before: z.number().nullable(),
    g_eff_after: z.number().nullable(),
  })
  .meta({ id: 'LineConsequence' })
export type LineConsequence = z.infer<typeof LineConsequence>

export const Consequences = z
  .strictObject({
    edition: z.int().meta({ description: 'The edition compared with: the newest.' }),
    counts: z.strictObject({ moved: z.int(), g_changed: z.int(), new: z.int(), gone: z.int() }),
    lines: z.array(LineConsequence).meta({ description: 'Allowed E1 lines, those that move most first; counts tell of all.' }),
    complete: z.boolean().meta({ description: 'Whether lines holds all that counts tells of.' }),
  })
  .meta({ id: 'Consequences' })
export type Consequences = z.infer<typeof Consequences>

export const Person = z.strictObject({ id: z.uuid(), name: z.string() }).meta({ id: 'PersonName' })

const CHANGE = {
  id: z.uuid(),
  amendment: z.uuid(),
  kind: ChangeKind,
  action: ChangeAction,
  subject: z.string().meta({ description: 'Na-I.3, the key of a source, Na-I, Na-I/23, or Na-I.3/23 for hyperfine constants. A new level has its ordinal from the start.', example: 'Na-I.3' }),
  species: SpeciesId.nullable(),
  level: LevelId.nullable(),
  values: AnyValues.nullable().meta({ description: 'As they were written.' }),
  reason: z.string().nullable(),
  successor: LevelId.nullable(),
  comment: z.string().nullable(),
  base_revision: z.int().nullable().meta({ description: 'Revision that it was made from; null where the subject was not in the table.' }),
  current_revision: z.int().nullable().meta({ description: 'Revision that the newest edition holds; where it is another than base_revision there is a finding base_stale.' }),
  before: AnyValues.nullable().meta({ description: 'The values of the newest edition.' }),
  after: AnyValues.nullable().meta({ description: 'The values as read; null where they cannot be, or the level is retired.' }),
  fields: z.array(FieldDifference).meta({ description: 'What differs between before and after.' }),
  findings: z.array(Finding),
  author: Person.meta({ description: 'Who wrote it last.' }),
  import_row: z.int().nullable().meta({ description: 'Line of the imported file that it came from.' }),
  version: z.int(),
  etag: z.string().meta({ description: 'For If-Match of PUT and DELETE.' }),
  created_at: Instant,
  updated_at: Instant,
}
export const AmendmentChange = z.strictObject(CHANGE).meta({ id: 'AmendmentChange' })
export type AmendmentChange = z.infer<typeof AmendmentChange>

export const AmendmentChangeDetail = z
  .strictObject({ ...CHANGE, consequences: Consequences.nullable().meta({ description: 'Which lines move and which g_eff change; null for a change that is not of a level, or that cannot be read. At most 50 lines.' }) })
  .meta({ id: 'AmendmentChangeDetail' })
export type AmendmentChangeDetail = z.infer<typeof AmendmentChangeDetail>

const Unanswered = z
  .strictObject({ action: ChangeAction, values: REQUEST.values, reason: text, successor: REQUEST.successor, comment: text })
  .meta({ id: 'UnansweredChange', description: 'What the same account sent before of the same subject and has no answer to. Where exactly that stands there by now, as the version right after `etag` (without change: as the first), the item is written upon it; anything else that came between is refused as ever. For a writer that cannot wait, such as a page that closes.' })

/** One of several changes written or checked together: with `change` an existing one is replaced, whose `etag` must still hold. */
export const BatchItem = z
  .strictObject({ ...REQUEST, change: z.uuid().optional(), etag: z.string().max(100).optional(), unanswered: Unanswered.optional() })
  .superRefine((request, context) => {
    checkRequest(request, VALUES, context)
    if ((request.change === undefined) !== (request.etag === undefined)) context.addIssue({ code: 'custom', path: [request.change === undefined ? 'change' : 'etag'], message: 'change and etag go together: the change that is edited, and its etag as last read.', params: { code: 'missing_field' } })
  })
  .meta({ id: 'BatchItem' })
export type BatchItem = z.infer<typeof BatchItem>
export const ChangeBatch = z
  .strictObject({ changes: z.array(BatchItem).min(1).max(1000), remove: z.array(z.strictObject({ change: z.uuid(), etag: z.string().max(100) })).max(1000).optional() })
  .meta({ id: 'ChangeBatch', description: 'Written together or not at all.', example: { changes: [ChangeRequest.meta()?.example] } })
export type ChangeBatch = z.infer<typeof ChangeBatch>

/** What a change would be, had it been written. */
export const CheckedChange = z
  .strictObject({ subject: z.string().nullable(), action: ChangeAction, before: AnyValues.nullable(), after: AnyValues.nullable(), fields: z.array(FieldDifference), findings: z.array(Finding) })
  .meta({ id: 'CheckedChange' })
export type CheckedChange = z.infer<typeof CheckedChange>
