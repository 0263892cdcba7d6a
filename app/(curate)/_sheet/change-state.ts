import type { AmendmentChange, ChangeAction, ChangeKind, ChangeRequest } from '@/openapi/schemas/change'

/** Values of a row as they are typed: text in every cell, kept as it is even where it cannot be read. */
export type Values = Readonly<Record<string, unknown>>

/** What a change is about. `level` is null for a level that the server has not given an ordinal yet. */
export interface Subject {
  kind: ChangeKind
  species: string | null
  level: string | null
  source: string | null
  massNumber: number | null
}

/** All that a curator decides about one subject; null where nothing is to change. */
export interface ChangeState {
  action: ChangeAction
  values: Values | null
  reason: string | null
  successor: string | null
  comment: string | null
}

const isBlank = (value: unknown): boolean => value === null || value === undefined || value === ''

/** The same for equal content: members in order, what is empty left out. */
export function canonical(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(canonical).join(',')}]`
  if (typeof value === 'object' && value !== null) {
    const entries = Object.entries(value).filter(([, member]) => !isBlank(member) && !(Array.isArray(member) && member.length === 0))
    return `{${entries.sort(([a], [b]) => (a < b ? -1 : 1)).map(([name, member]) => `${JSON.stringify(name)}:${canonical(member)}`).join(',')}}`
  }
  return JSON.stringify(value ?? null)
}

export const sameValues = (a: Values | null, b: Values | null): boolean => canonical(a ?? {}) === canonical(b ?? {})
export const sameState = (a: ChangeState | null, b: ChangeState | null): boolean => (a === null || b === null ? a === b : a.action === b.action && canonical(a) === canonical(b))

/** The decision that a stored change stands for. */
export const stateOf = (change: AmendmentChange): ChangeState => ({
  action: change.action,
  values: (change.values as Values | null) ?? null,
  reason: change.reason,
  successor: change.successor,
  comment: change.comment,
})

const MASS = /\/(\d+)$/

export function subjectOf(change: AmendmentChange): Subject {
  const mass = MASS.exec(change.subject)?.[1]
  const level = change.level ?? (change.kind === 'hyperfine' ? change.subject.replace(MASS, '') : change.kind === 'level' ? change.subject : null)
  return {
    kind: change.kind,
    species: change.species,
    level,
    source: change.kind === 'source' ? change.subject : null,
    massNumber: mass === undefined || (change.kind !== 'isotope' && change.kind !== 'hyperfine') ? null : Number(mass),
  }
}

/** One row for one subject, whoever wrote its change: `level:Na-I.3`, `isotope:Na-I/23`. */
export function keyOf(subject: Subject): string | null {
  switch (subject.kind) {
    case 'level': return subject.level === null ? null : `level:${subject.level}`
    case 'source': return `source:${subject.source}`
    case 'species': return `species:${subject.species}`
    case 'isotope': return `isotope:${subject.species}/${subject.massNumber}`
    case 'hyperfine': return `hyperfine:${subject.level}/${subject.massNumber}`
  }
}

/** How a subject is called on the page. */
export function subjectName(subject: Subject): string {
  switch (subject.kind) {
    case 'level': return subject.level ?? `new level of ${subject.species}`
    case 'source': return subject.source ?? ''
    case 'species': return subject.species ?? ''
    case 'isotope': return `${subject.species}/${subject.massNumber}`
    case 'hyperfine': return `${subject.level}/${subject.massNumber}`
  }
}

const withoutBlanks = (values: Values): Record<string, unknown> => Object.fromEntries(Object.entries(values).filter(([, value]) => !isBlank(value)))

/** The body of a request that writes this decision. */
export function requestOf(subject: Subject, state: ChangeState): ChangeRequest {
  const request: ChangeRequest = { kind: subject.kind, action: state.action }
  if (subject.kind === 'level') {
    if (state.action === 'create') request.species = subject.species ?? undefined
    else request.level = subject.level ?? undefined
  } else if (subject.kind === 'source') request.source = subject.source ?? undefined
  else if (subject.kind === 'hyperfine') request.level = subject.level ?? undefined
  else request.species = subject.species ?? undefined
  if (subject.massNumber !== null) request.mass_number = subject.massNumber
  if (state.action !== 'retire') request.values = withoutBlanks(state.values ?? {})
  if (!isBlank(state.reason)) request.reason = state.reason
  if (!isBlank(state.successor)) request.successor = state.successor
  if (!isBlank(state.comment)) request.comment = state.comment
  return request
}

/** Values typed upon an incomplete reading of the published ones, carried over to the complete reading. */
export function rebase(typed: Values, seen: Values, complete: Values): Values {
  const next: Record<string, unknown> = { ...complete }
  for (const name of new Set([...Object.keys(typed), ...Object.keys(seen)])) {
    const [mine, before, whole] = [typed[name], seen[name], complete[name]]
    if (canonical(mine) === canonical(before)) continue
    next[name] = Array.isArray(mine) && Array.isArray(before) && Array.isArray(whole)
      ? mine.map((item: unknown, at) => (isRecord(item) && isRecord(before[at]) && isRecord(whole[at]) ? rebase(item, before[at], whole[at]) : item))
      : mine
  }
  return next
}

export const isRecord = (value: unknown): value is Record<string, unknown> => typeof value === 'object' && value !== null && !Array.isArray(value)
