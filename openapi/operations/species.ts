import { z } from 'zod'
import { defineOperation } from '@/openapi/core/define'
import { Source } from '@/openapi/schemas/source'
import { Species } from '@/openapi/schemas/species'
import { speciesPath } from './parameters'

export const listSpecies = defineOperation({
  id: 'listSpecies',
  method: 'get',
  path: '/species',
  summary: 'All species of an edition',
  tag: 'Table',
  role: 'reader',
  answer: Species,
  list: true,
  edition: 'stored',
  formats: ['csv', 'ndjson', 'ecsv', 'arrow'],
})

export const getSpecies = defineOperation({
  id: 'getSpecies',
  method: 'get',
  path: '/species/{species}',
  summary: 'One species: name, stage, ionisation energy, isotopes, number of levels, sources',
  tag: 'Table',
  role: 'reader',
  params: z.strictObject({ species: speciesPath }),
  answer: Species,
  edition: 'stored',
  problems: ['species_unknown'],
  example: { params: { species: 'Na-I' } },
})

export const listSources = defineOperation({
  id: 'listSources',
  method: 'get',
  path: '/sources',
  summary: 'The bibliography of an edition',
  tag: 'Table',
  role: 'reader',
  answer: Source,
  list: true,
  edition: 'stored',
  formats: ['csv', 'ndjson', 'ecsv', 'arrow'],
})

export const getSource = defineOperation({
  id: 'getSource',
  method: 'get',
  path: '/sources/{key}',
  summary: 'One source and how many values rest on it',
  tag: 'Table',
  role: 'reader',
  params: z.strictObject({ key: z.string().min(1).max(120).regex(/^[a-z0-9][a-z0-9-]*$/, 'the key of a source, small letters, digits and hyphens such as sansonetti-2008-na').meta({ description: 'Key of the source.', example: 'sansonetti-2008-na' }) }),
  answer: Source,
  edition: 'stored',
  problems: ['source_unknown'],
})
