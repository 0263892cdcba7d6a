import { Problem } from '@/lib/problem'

/** Raised whenever the form of stored answers changes, so that no cache goes on with the old form under the old tag. */
export const FORM_VERSION = 2

const listOf = (field: string): string[] => field.match(/(?:W\/)?"[^"]*"|\*/g) ?? []

/** Whether If-None-Match names the tag (weak comparison, RFC 9110 section 13.1.2). */
export function noneMatchHits(field: string | null, tag: string): boolean {
  return field !== null && (listOf(field).includes('*') || noneMatchNames(field, tag))
}

/** The same without `*`, which stands for whatever exists: for use before it is known that something does. */
export const noneMatchNames = (field: string, tag: string): boolean => listOf(field).some((given) => given.replace(/^W\//, '') === tag)

/** The strong tag of If-Match; 428 where it is missing, 400 where it is not a strong tag. */
export function readIfMatch(field: string | null): string {
  if (field === null || field.trim() === '') throw new Problem('if_match_missing', 'Send If-Match with the ETag that you last read.')
  const tags = listOf(field)
  const [tag] = tags
  if (tag === undefined || tags.length > 1 || tag === '*' || tag.startsWith('W/')) throw new Problem('if_match_malformed', 'If-Match must be one strong entity tag in quotes, as ETag gave it.')
  return tag
}
