import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'

/** Reads a file of `tests/reference/data`; the shape is the caller's to state, as its header describes it. */
export function readData<T>(name: string): T {
  const path = fileURLToPath(new URL(`./data/${name}`, import.meta.url))
  return JSON.parse(readFileSync(path, 'utf8')) as T
}

/** A table row as arrays: the file's `cases`. */
export const readCases = <T>(name: string): T[] => readData<{ cases: T[] }>(name).cases
