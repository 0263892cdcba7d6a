import { getConfig } from '@/lib/config'
import type { Message } from '@/lib/mail/messages'
import { oneLine } from '@/lib/mail/text'

/** One value before and after; `before` null where there was nothing to compare with. */
export interface FieldNews { name: string; before: string | null; after: string }
export interface LinePosition { wavenumber: number; nm: number; medium: string; gEff: number | null }
export interface LineNews { id: string; before: LinePosition | null; after: LinePosition | null }
export interface LevelNews { id: string; state: 'changed' | 'retired' | 'new'; fields: FieldNews[]; reason: string | null; successor: string | null; lines: LineNews[]; moreLines: number }
/** What an edition changed of one thing that somebody follows. */
export interface FollowedNews { kind: 'species' | 'level' | 'line'; subject: string; fields: FieldNews[]; levels: LevelNews[]; moreLevels: number; line: LineNews | null }

/** What one mail holds: the page of the edition tells the rest. */
const MOST_THINGS = 100
const MOST_TEXT = 100_000

const page = (path: string): string => `${getConfig().baseUrl}${path}`
const pageOf = (kind: FollowedNews['kind'], subject: string): string => page(`/${{ species: 'species', level: 'levels', line: 'lines' }[kind]}/${encodeURIComponent(subject)}`)
const signed = (text: string): string => (text.startsWith('-') ? text : `+${text}`)

/** A difference with three digits that mean something, however small. */
const small = (value: number): string => (value === 0 ? '0' : Math.abs(value) >= 1e-3 && Math.abs(value) < 1e5 ? String(Number(value.toPrecision(3))) : value.toExponential(2))
/** As many decimals as it takes to see the move. */
const decimalsFor = (move: number): number => (move === 0 ? 4 : Math.min(10, Math.max(4, 1 - Math.floor(Math.log10(Math.abs(move))))))

/** `588.99510 nm (air) -> 588.99497 nm (air), moved by -0.13 pm (+0.00381 cm^-1)` */
export function lineText({ before, after }: LineNews): string {
  if (before === null || after === null) {
    const there = before ?? after
    return there === null ? 'no line' : `${there.nm.toFixed(4)} nm (${there.medium}): ${before === null ? 'new' : 'gone'}`
  }
  const [nm, invcm] = [after.nm - before.nm, after.wavenumber - before.wavenumber]
  const decimals = decimalsFor(nm)
  const parts = [`${before.nm.toFixed(decimals)} nm (${before.medium}) -> ${after.nm.toFixed(decimals)} nm (${after.medium})`]
  parts.push(Math.abs(invcm) > 1e-9 ? `moved by ${signed(small(nm * 1000))} pm (${signed(small(invcm))} cm^-1)` : 'not moved')
  if (before.gEff !== after.gEff) parts.push(`g_eff ${before.gEff?.toFixed(6) ?? 'not known'} -> ${after.gEff?.toFixed(6) ?? 'not known'}`)
  return parts.join(', ')
}

const fieldText = ({ name, before, after }: FieldNews): string => (before === null ? `${name}: ${oneLine(after, 300)}` : `${name}: ${oneLine(before, 300)} -> ${oneLine(after, 300)}`)

function levelText(level: LevelNews, indent: string): string[] {
  if (level.state === 'retired') {
    const successor = level.successor === null ? 'It has no successor.' : `Its successor is ${level.successor}: ${pageOf('level', level.successor)}`
    return [`${indent}${level.id} is retired${level.reason === null ? '' : `: ${oneLine(level.reason, 300)}`}`, `${indent}  ${successor}`]
  }
  const lines = [`${indent}${level.id}${level.state === 'new' ? ' is new' : ''}`, ...level.fields.map((field) => `${indent}  ${fieldText(field)}`)]
  if (level.lines.length > 0) lines.push(`${indent}  lines of it:`, ...level.lines.map((line) => `${indent}    ${line.id}  ${lineText(line)}`))
  if (level.moreLines > 0) lines.push(`${indent}    and ${level.moreLines} more`)
  return lines
}

function newsText(news: FollowedNews): string {
  const { kind, subject, line } = news
  const lines = [`${kind === 'species' ? 'Species' : kind === 'level' ? 'Level' : 'Line'} ${subject}`, `  ${pageOf(kind, subject)}`]
  lines.push(...news.fields.map((field) => `  ${fieldText(field)}`))
  if (kind === 'line') lines.push(line === null ? '  The line itself stays where it was.' : `  ${lineText(line)}`)
  for (const level of news.levels) lines.push(...levelText(level, '  '))
  if (news.moreLevels > 0) lines.push(`  and ${news.moreLevels} more levels: see the comparison of the editions`)
  return lines.join('\n')
}

/** As many of the texts as fit, the first in any case. */
function within(texts: readonly string[]): string[] {
  let length = 0
  return texts.filter((text, index) => (length += text.length) <= MOST_TEXT || index === 0)
}

/** One mail to one follower about everything followed that an edition changed. */
export function editionMail(edition: { edition: number; label: string; since: number }, name: string, news: readonly FollowedNews[]): Message {
  const told = within(news.slice(0, MOST_THINGS).map(newsText))
  const subjects = news.slice(0, 3).map(({ subject }) => subject).join(', ')
  const more = news.length > 3 ? ` and ${news.length - 3} more` : ''
  const parts = [
    `Hello ${oneLine(name)},`,
    `Edition ${edition.edition} (${oneLine(edition.label)}) is published. It changes ${news.length === 1 ? 'one thing' : `${news.length} things`} that you follow; values are those of edition ${edition.since} -> edition ${edition.edition}.`,
    ...told,
    ...(news.length > told.length ? [`and ${news.length - told.length} more things that you follow.`] : []),
    `All changes: ${page(`/editions/compare?from=${edition.since}&to=${edition.edition}`)}\nEdition ${edition.since} stays as it was: add edition=${edition.since} to any address.`,
    `You get this because you follow these things. What you follow: ${page('/following')}`,
  ]
  return { subject: `Edition ${edition.edition} changes ${subjects}${more}`, text: parts.join('\n\n') }
}
