import { computeSublevels, convertWavelength, decodeTerm } from './computed'
import {
  downloadEditionLevels, getEdition, getEditionCitation, getEditionContent, getLevelHistory, getLevelMap, getSourceCitation, listChanges, listEditionChanges, listEditions, previewNextEdition,
  publishEdition,
} from './editions'
import { fitFieldOperation } from './field-fits'
import { makeFieldTable } from './field-tables'
import { find } from './find'
import { getCrossings, getGFactor, getLevel, getSublevels, listLevels, listLevelTransitions } from './levels'
import { predict } from './predictions'
import { computeProfiles } from './profiles'
import { getSource, getSpecies, listSources, listSpecies } from './species'
import { getComponents, getTransition, judgeTransition, listTransitions } from './transitions'

/** Everything that reads the table or computes from it. */
export const READING_OPERATIONS = [
  listSpecies, getSpecies, listLevels, getLevel, getGFactor, getSublevels, getCrossings, listLevelTransitions, listTransitions, getTransition, getComponents,
  judgeTransition, decodeTerm, computeSublevels, fitFieldOperation, predict, makeFieldTable, computeProfiles, convertWavelength, listEditions, previewNextEdition, publishEdition, getEdition, listEditionChanges, getLevelMap, downloadEditionLevels,
  getEditionContent, getEditionCitation, listChanges, getLevelHistory, listSources, getSource, getSourceCitation, find,
]
