import { Problem } from '@/lib/problem'
import type { ChangeKind, ChangeRequest } from '@/openapi/schemas/change'
import { speciesOfLevel } from './checks/work'

/** What a request is of. `subject` is null for a new level, which has no ordinal yet. */
export interface Named { kind: ChangeKind; subject: string | null; speciesId: string | null }

/** The contract has seen to it that the members which name the subject are there. */
export function namedBy(request: ChangeRequest): Named {
  const kind = request.kind ?? 'level'
  const { species = '', level = '', source = '', mass_number: mass = 0 } = request
  if (kind === 'source') return { kind, subject: source, speciesId: null }
  if (kind === 'species') return { kind, subject: species, speciesId: species }
  if (kind === 'isotope') return { kind, subject: `${species}/${mass}`, speciesId: species }
  if (kind === 'hyperfine') return { kind, subject: `${level}/${mass}`, speciesId: speciesOfLevel(level) }
  return request.action === 'create' ? { kind, subject: null, speciesId: species } : { kind, subject: level, speciesId: speciesOfLevel(level) }
}

/** 409 where an edit would make a change one of something else. */
export function requireSameSubject(request: ChangeRequest, change: { kind: ChangeKind; subject: string; speciesId: string | null; action: string }): void {
  const named = namedBy(request)
  const same = named.kind === change.kind && (named.subject === null ? change.action === 'create' && named.speciesId === change.speciesId : named.subject === change.subject)
  if (!same || (change.kind === 'level' && (change.action === 'create') !== (request.action === 'create'))) {
    throw new Problem('subject_mismatch', `This change is of ${change.kind} ${change.subject}${change.action === 'create' ? ', which it makes' : ''}: it keeps what it is about. Take it out and make another.`)
  }
}

const text = (value: string | null | undefined): string | null => {
  const plain = value?.trim() ?? ''
  return plain === '' ? null : plain
}

/** What of a request is stored beside the values. */
export const wordsOf = (request: ChangeRequest): { reason: string | null; successor: string | null; comment: string | null } => ({ reason: text(request.reason), successor: request.successor ?? null, comment: text(request.comment) })
