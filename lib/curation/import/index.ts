/** Import of tables of levels into an amendment: begun, followed, stopped, and what it says of each row. */
export { importColumnList, importReport } from './answers'
export { startImport } from './run'
export { listImports, readImport, stopImport } from './store'
