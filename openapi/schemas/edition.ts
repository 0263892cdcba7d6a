import { z } from 'zod'
import { oneLine } from '@/openapi/core/one-line'
import { ChangeAction, ChangeKind, FieldDifference, Person } from './change'
import { LevelId, SpeciesId } from './common'
import { Instant } from './session'

export const Edition = z
  .strictObject({
    number: z.int(),
    label: z.string(),
    notes: z.string(),
    checksum: z.string().meta({ description: 'SHA-256 of the canonical content, hexadecimal: GET /editions/{n}/content is what it is made of.' }),
    counts: z.strictObject({
      species: z.int(),
      levels: z.int(),
      sources: z.int(),
      measured_g: z.int(),
      isotopes: z.int(),
      hyperfine_constants: z.int(),
    }),
    published_at: z.iso.datetime({ offset: true }),
    published_by: z.string().nullable().meta({ description: 'Name of who published it.' }),
    links: z.strictObject({ self: z.string(), page: z.string(), levels: z.string(), changes: z.string() }),
  })
  .meta({ id: 'Edition' })
export type Edition = z.infer<typeof Edition>

export const ComparedAction = z.enum(['created', 'replaced', 'retired', 'restored', 'absent']).meta({
  id: 'ComparedAction',
  description:
    'What edition n shows against edition since. created: since does not have it. replaced: both have it, with other values. retired: it is retired in n. Where since is the later edition: restored: it is retired in since and not in n; absent: n does not have it yet.',
})
export type ComparedAction = z.infer<typeof ComparedAction>

export const Change = z
  .strictObject({
    kind: ChangeKind,
    subject: z.string().meta({ description: 'Na-I.3, the key of a source, Na-I, Na-I/23, or Na-I.3/23 for hyperfine constants.', example: 'Na-I.3' }),
    level: LevelId.nullable().meta({ description: 'The level it is about; null where it is about none.' }),
    species: SpeciesId.nullable(),
    action: ComparedAction,
    fields: z.array(FieldDifference).meta({ description: 'before: the value in edition since; after: the value in edition n.' }),
  })
  .meta({ id: 'Change' })
export type Change = z.infer<typeof Change>

/** Where a level of an earlier edition stands in a later one: what a fit made on the earlier one is moved by. */
export const MappedLevel = z
  .strictObject({
    level_old: LevelId.nullable().meta({ description: 'Level in edition since; null for one that is new.' }),
    level_new: LevelId.nullable().meta({ description: 'The same level in edition n, or the active one at the end of its successors; null where nothing took its place.' }),
    status: z.enum(['same', 'changed', 'retired', 'created']),
    species: SpeciesId,
    configuration: z.string(),
    term: z.string().meta({ description: 'Term symbol with J, of the new level where there is one.' }),
    energy_old_invcm: z.number().nullable(),
    energy_new_invcm: z.number().nullable(),
    shift_invcm: z.number().nullable().meta({ description: 'New minus old.' }),
    g_j_old: z.number().nullable().meta({ description: 'Adopted.' }),
    g_j_new: z.number().nullable(),
  })
  .meta({ id: 'MappedLevel' })
export type MappedLevel = z.infer<typeof MappedLevel>

const AmendmentName = z.strictObject({ id: z.uuid(), title: z.string() })

/** One entry of the feed. */
export const FeedEntry = z
  .strictObject({
    sequence: z.int(),
    edition: z.int(),
    kind: ChangeKind,
    subject: z.string(),
    action: ChangeAction,
    amendment: AmendmentName,
  })
  .meta({ id: 'FeedEntry' })
export type FeedEntry = z.infer<typeof FeedEntry>

/** One revision of a level, and how it came about. */
export const LevelRevision = z
  .strictObject({
    revision: z.int(),
    edition: z.int().meta({ description: 'The first edition that shows it.' }),
    edition_label: z.string(),
    published_at: Instant,
    until_edition: z.int().nullable().meta({ description: 'The first edition that shows it no more; null where it is in force.' }),
    action: z.enum(['created', 'replaced', 'retired', 'restored']),
    fields: z.array(FieldDifference).meta({ description: 'What differs from the revision before; empty for the first.' }),
    amendment: AmendmentName.nullable().meta({ description: 'Null for what a new installation was loaded with.' }),
    authors: z.array(z.string()).meta({ description: 'Names of those who wrote the amendment.' }),
    reviewer: z.string().nullable().meta({ description: 'Name of who accepted it.' }),
    reason: z.string().nullable().meta({ description: 'What was written with the change.' }),
    comment: z.string().nullable(),
  })
  .meta({ id: 'LevelRevision' })
export type LevelRevision = z.infer<typeof LevelRevision>

/** Why accepted amendments cannot be published together. */
export const PublicationConflict = z
  .strictObject({
    code: z.string().meta({ description: 'same_subject: two amendments change one thing. base_stale: it was changed by an edition since. Else the code of the error that the check of all of them together finds.' }),
    kind: ChangeKind,
    subject: z.string(),
    detail: z.string(),
    changes: z.array(z.strictObject({ amendment: AmendmentName, change: z.uuid(), subject: z.string() })).meta({ description: 'Every change that takes part, with its amendment.' }),
    base_revision: z.int().nullable().meta({ description: 'base_stale: the revision that the change was made from.' }),
    current_revision: z.int().nullable().meta({ description: 'base_stale: the revision in force.' }),
  })
  .meta({ id: 'PublicationConflict' })
export type PublicationConflict = z.infer<typeof PublicationConflict>

const KindCounts = z.strictObject({ create: z.int(), replace: z.int(), retire: z.int() })

export const NextEdition = z
  .strictObject({
    number: z.int(),
    label: z.string().meta({ description: 'Suggested.' }),
    notes: z.string().meta({ description: 'Suggested: written from the changes.' }),
    amendments: z.array(z.strictObject({ id: z.uuid(), title: z.string(), version: z.int(), author: Person, reviewer: z.string().nullable(), changes: z.int() })).meta({ description: 'All that are accepted; send id and version with POST /editions to publish these and no others.' }),
    counts: z.strictObject({ changes: z.int(), level: KindCounts, source: KindCounts, species: KindCounts, isotope: KindCounts, hyperfine: KindCounts }),
    conflicts: z.array(PublicationConflict).meta({ description: 'What stands in the way; at most 200.' }),
  })
  .meta({ id: 'NextEdition' })
export type NextEdition = z.infer<typeof NextEdition>

export const NewEdition = z
  .strictObject({
    label: oneLine(),
    notes: z.string().trim().max(20_000).optional().meta({ description: 'Those that GET /editions/next suggests where they are left out.' }),
    amendments: z.array(z.strictObject({ id: z.uuid(), version: z.int().min(1) })).min(1).max(1000).optional().meta({ description: 'What was seen: where other amendments, or other versions of them, are accepted by now, nothing is published.' }),
  })
  .meta({ id: 'NewEdition', example: { label: 'Second edition' } })
export type NewEdition = z.infer<typeof NewEdition>

export const Citation = z
  .strictObject({
    text: z.string(),
    bibtex: z.string(),
    csl_json: z.record(z.string(), z.unknown()).meta({ description: 'One item of CSL-JSON.' }),
  })
  .meta({ id: 'Citation' })
export type Citation = z.infer<typeof Citation>

const Entities = z.array(z.looseObject({ id: z.string() }))
export const EditionContentDocument = z
  .strictObject({
    constants: z.string(),
    content: z.strictObject({ hyperfine_constants: Entities, isotopes: Entities, levels: Entities, measured_g: Entities, sources: Entities, species: Entities }),
    counts: z.record(z.string(), z.int()),
    label: z.string(),
    notes: z.string(),
    number: z.int(),
  })
  .meta({ id: 'EditionContentDocument' })
