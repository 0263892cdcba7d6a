/** Between what a curator writes and what the table keeps: reading with findings, writing in the normal form, and what differs. */
export { type Atom, atomOf, coreOf, type ReadConfiguration, readConfiguration } from './atom'
export { differences, writeValues } from './difference'
export { Findings } from './findings'
export { type LevelParts, type LevelReading, readLevelValues, writeLevelValues } from './level'
export { printLevelTerm, readLevelTerm } from './level-term'
export { decimalsOf, readPrinted } from './numbers'
export { ionOf, readHyperfine, readIsotope, readSource, readSpecies } from './others'
