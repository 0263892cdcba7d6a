import { z } from 'zod'
import { defineOperation } from '@/openapi/core/define'
import { choiceParameter, numberParameter, repeatable } from '@/openapi/core/parameters'
import { Change, Citation, Edition, EditionContentDocument, FeedEntry, LevelRevision, MappedLevel, NewEdition, NextEdition } from '@/openapi/schemas/edition'
import { Level } from '@/openapi/schemas/level'
import { levelPath, speciesPath } from './parameters'

const onlyNumber = z.strictObject({ n: numberParameter('Number of the edition.', { min: 1, max: 999_999_999, integer: true, example: 1 }) })

export const listEditions = defineOperation({
  id: 'listEditions',
  method: 'get',
  path: '/editions',
  summary: 'All editions, the newest first',
  tag: 'Editions',
  role: 'reader',
  answer: Edition,
  list: true,
  edition: 'none',
})

export const getEdition = defineOperation({
  id: 'getEdition',
  method: 'get',
  path: '/editions/{n}',
  summary: 'One edition: label, notes, counts, checksum',
  tag: 'Editions',
  role: 'reader',
  params: onlyNumber,
  answer: Edition,
  edition: 'stored',
  editionIn: 'path',
  problems: ['edition_unknown'],
  example: { params: { n: '1' } },
})

export const listEditionChanges = defineOperation({
  id: 'listEditionChanges',
  method: 'get',
  path: '/editions/{n}/changes',
  summary: 'What changed since another edition, thing by thing, field by field',
  description:
    'Edition n against edition since: `before` is the value in since, `after` the value in n. Either may be the later one; where since is later, the comparison runs backwards, and what n does not have yet is `absent`, what was retired in between `restored`. What came and went in between is not told. Sources first, then species, isotopes, levels and hyperfine constants in the order of the table. meta.total counts what the filters leave, meta.counts everything by kind and action. In CSV one row a field; what is new or absent has one row.',
  tag: 'Editions',
  role: 'reader',
  params: onlyNumber,
  query: z.strictObject({
    since: numberParameter('Edition to compare with; 0 is the empty table. Default: the edition before.', { min: 0, max: 999_999_999, integer: true }).optional(),
    kind: choiceParameter(['level', 'source', 'species', 'isotope', 'hyperfine'], 'Only this kind of thing.').optional(),
    action: choiceParameter(['created', 'replaced', 'retired', 'restored', 'absent'], 'Only what this happened to.').optional(),
    species: repeatable(speciesPath, 'Only what belongs to this species; may be given several times.').optional(),
  }),
  answer: Change,
  list: true,
  edition: 'stored',
  editionIn: 'path',
  numberOnly: true,
  formats: ['csv', 'ndjson'],
  problems: ['edition_unknown', 'species_malformed'],
  example: { params: { n: '1' }, query: { since: '0' } },
})

export const getLevelMap = defineOperation({
  id: 'getLevelMap',
  method: 'get',
  path: '/editions/{n}/level-map',
  summary: 'Where the levels of an earlier edition stand in this one, as a file for refits',
  description:
    'Not paged: every active level of edition since with its place in edition n, then the levels that are new. same and changed: the same level, without and with other values. retired: level_new is the active level at the end of its successors, or empty. created: level_old is empty. Choose the form with format= or Accept: json, csv or ndjson.',
  tag: 'Editions',
  role: 'reader',
  params: onlyNumber,
  query: z.strictObject({ since: numberParameter('Earlier edition; 0 is the empty table. Default: the edition before.', { min: 0, max: 999_999_999, integer: true }).optional() }),
  answer: z.array(MappedLevel),
  edition: 'stored',
  editionIn: 'path',
  formats: ['csv', 'ndjson'],
  problems: ['edition_unknown'],
  example: { params: { n: '1' }, query: { since: '0' } },
})

export const getEditionContent = defineOperation({
  id: 'getEditionContent',
  method: 'get',
  path: '/editions/{n}/content',
  summary: 'The canonical content of an edition: exactly the bytes that its checksum is made of',
  description:
    'SHA-256 of the body, as it comes, is the edition\'s `checksum`: `curl -s .../editions/1/content | sha256sum`. The body is one JSON object in the canonical form of RFC 8785 (keys in order, no spaces, numbers as ECMAScript writes them, UTF-8): `constants` (edition of the fundamental constants), `content`, `counts`, `label`, `notes`, `number`. `content` has the arrays `hyperfine_constants`, `isotopes`, `levels` (retired ones too), `measured_g`, `sources`, `species`; each holds one flat object for each thing that the edition shows, in the order of its `id` (code units), several of one id in the order of their own canonical text. Angular momenta are twice their value (`two_j`), literals are text, what is not known is null. Whoever parses the body and writes it again by RFC 8785 gets the same bytes; `npm run verify-edition -- N --url ...` does so.',
  tag: 'Editions',
  role: 'reader',
  params: onlyNumber,
  query: z.strictObject({}),
  answer: EditionContentDocument,
  edition: 'stored',
  editionIn: 'path',
  numberOnly: true,
  bare: true,
  problems: ['edition_unknown'],
  example: { params: { n: '1' } },
})

export const getEditionCitation = defineOperation({
  id: 'getEditionCitation',
  method: 'get',
  path: '/editions/{n}/citation',
  summary: 'How to cite an edition: text, BibTeX, CSL-JSON',
  tag: 'Editions',
  role: 'reader',
  params: onlyNumber,
  answer: Citation,
  edition: 'stored',
  editionIn: 'path',
  numberOnly: true,
  problems: ['edition_unknown'],
  example: { params: { n: '1' } },
})

export const listChanges = defineOperation({
  id: 'listChanges',
  method: 'get',
  path: '/changes',
  summary: 'Feed of everything that editions changed, in one sequence',
  description: 'Sequence numbers rise and never change; there may be gaps. Ask again with after= the last one seen: nothing is missed, since an edition enters the feed whole; `meta.last_sequence` is that one, and stays what was asked for where nothing is new. What the first edition of a new installation holds is not in it.',
  tag: 'Editions',
  role: 'reader',
  query: z.strictObject({ after: numberParameter('Last sequence number already seen.', { min: 0, max: 9_007_199_254_740_991, integer: true }).prefault('0') }),
  answer: FeedEntry,
  list: true,
  edition: 'none',
  formats: ['csv', 'ndjson'],
  example: { query: { after: '0' } },
})

export const getLevelHistory = defineOperation({
  id: 'getLevelHistory',
  method: 'get',
  path: '/levels/{level}/history',
  summary: 'Every revision of a level: since which edition, what changed, by whose amendment, and why',
  description: 'The newest first, over all editions; a retired level has its history too.',
  tag: 'Levels',
  role: 'reader',
  params: z.strictObject({ level: levelPath }),
  answer: z.array(LevelRevision),
  edition: 'none',
  problems: ['level_unknown', 'level_malformed'],
  example: { params: { level: 'Na-I.3' } },
})

export const getSourceCitation = defineOperation({
  id: 'getSourceCitation',
  method: 'get',
  path: '/sources/{key}/citation',
  summary: 'How to cite a source: text, BibTeX, CSL-JSON',
  tag: 'Table',
  role: 'reader',
  params: z.strictObject({ key: z.string().min(1).max(120).regex(/^[a-z0-9][a-z0-9-]*$/, 'the key of a source, small letters, digits and hyphens such as sansonetti-2008-na').meta({ description: 'Key of the source.', example: 'sansonetti-2008-na' }) }),
  answer: Citation,
  edition: 'stored',
  problems: ['source_unknown'],
  example: { params: { key: 'sansonetti-2008-na' } },
})

export const previewNextEdition = defineOperation({
  id: 'previewNextEdition',
  method: 'get',
  path: '/editions/next',
  summary: 'What the next edition would be: amendments, counts, notes written from the changes, conflicts',
  tag: 'Editions',
  role: 'curator',
  answer: NextEdition,
  edition: 'none',
})

export const publishEdition = defineOperation({
  id: 'publishEdition',
  method: 'post',
  path: '/editions',
  summary: 'Publish all accepted amendments as the next edition, whole or not at all',
  description:
    'Every check is run again on all accepted changes together, on the table as it would be. Where two of them conflict, or one was made from a revision that is no longer in force, nothing is published, and 409 names every conflict with its amendments and changes. With `amendments` exactly those versions are published, or nothing.',
  tag: 'Editions',
  role: 'admin',
  body: NewEdition,
  answer: Edition,
  edition: 'none',
  status: 201,
  idempotent: true,
  problems: ['nothing_to_publish', 'accepted_set_changed', 'publication_conflict'],
  // an amendment that is nobody's: whoever tries the example publishes nothing
  example: { body: { label: 'Second edition', amendments: [{ id: '00000000-0000-4000-8000-000000000000', version: 1 }] } },
})

export const downloadEditionLevels = defineOperation({
  id: 'downloadEditionLevels',
  method: 'get',
  path: '/editions/{n}/levels',
  summary: 'The whole table of an edition as a file',
  description: 'Not paged. Choose the form with format= or Accept: json, csv, ndjson, ecsv or arrow.',
  tag: 'Editions',
  role: 'reader',
  params: onlyNumber,
  query: z.strictObject({}),
  answer: z.array(Level),
  edition: 'stored',
  editionIn: 'path',
  formats: ['csv', 'ndjson', 'ecsv', 'arrow'],
  problems: ['edition_unknown'],
  example: { params: { n: '1' } },
})
