import type { LsTerm } from '@/lib/atomic/term'

/** Equivalent electrons: n, l, how many. */
export interface Shell {
  kind: 'shell'
  n: number
  l: number
  count: number
}

/** The term that the shells before it make together; with J in pair coupling. Its parity is that of those shells. */
export interface ParentPart {
  kind: 'parent'
  term: LsTerm
}

export type ConfigurationPart = Shell | ParentPart

/** Shells and parents in the order written. `core` is the noble gas that stands in brackets before them (`Ar`), if one does. */
export interface Configuration {
  core: string | null
  parts: ConfigurationPart[]
}

export const capacity = (l: number): number => 4 * l + 2
export const isShell = (part: ConfigurationPart): part is Shell => part.kind === 'shell'
