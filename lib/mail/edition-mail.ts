import { getConfig } from '@/lib/config'
import type { Message } from '@/lib/mail/messages'
import { oneLine } from '@/lib/mail/text'

/** One value before and after; `before` null where there was nothing to compare with. */
export interface FieldNews { name: string; before: string | null; after: string }
export interface LinePosition { wavenumber: number; nm: number; medium: string; gEff: number | null }
export interface LineNews { id: string; before: LinePosition | null; after: LinePosition | null }
export interface LevelNews { id: string; state: 'changed' | 'retired' | 'new'; fields: FieldNews[]; reason: string | null; successor: string | null; lines: LineNews[]; moreLines: number }
/** What an edition changed of one thing that somebody follows; `moreLevels` counts those that are not told one by one. */
export interface FollowedNews { kind: 'species' | 'level' | 'line'; subject: string; fields: FieldNews[]; levels: LevelNews[]; moreLevels: Partial<Record<LevelNews['state'], number>>; line: LineNews | null }

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

const fieldsText = ({ fields }: LevelNews, indent: string): string[] => fields.map((field) => `${indent}  ${fieldText(field)}`)

function levelText(level: LevelNews, indent: string): string[] {
  if (level.state === 'retired') {
    const successor = level.successor === null ? 'It has no successor.' : `Its successor is ${level.successor}: ${pageOf('level', level.successor)}`
    return [`${indent}${level.id} is retired${level.reason === null ? '' : `: ${oneLine(level.reason, 300)}`}`, `${indent}  ${successor}`, ...fieldsText(level, indent)]
  }
  const lines = [`${indent}${level.id}${level.state === 'new' ? ' is new' : ''}`, ...fieldsText(level, indent)]
  if (level.lines.length > 0) lines.push(`${indent}  lines of it:`, ...level.lines.map((line) => `${indent}    ${line.id}  ${lineText(line)}`))
  if (level.moreLines > 0) lines.push(`${indent}    and ${level.moreLines} more`)
  return lines
}

function newsText(news: FollowedNews, comparison: string): string {
  const { kind, subject, line } = news
  const lines = [`${kind === 'species' ? 'Species' : kind === 'level' ? 'Level' : 'Line'} ${subject}`, `  ${pageOf(kind, subject)}`]
  lines.push(...news.fields.map((field) => `  ${fieldText(field)}`))
  if (kind === 'line') lines.push(line === null ? '  The line itself stays where it was.' : `  ${lineText(line)}`)
  for (const level of news.levels) lines.push(...levelText(level, '  '))
  const more = Object.entries(news.moreLevels)
  if (more.length > 0) lines.push(`  and ${more.reduce((sum, [, count]) => sum + count, 0)} more levels (${more.map(([state, count]) => `${count} ${state}`).join(', ')}): ${comparison}`)
  return within(lines, '\n', `  and more: ${comparison}`)
}

/** As much of the lines as fits in one mail, and where the rest is told. */
function within(lines: readonly string[], between: string, rest: string): string {
  let length = 0
  const fitting = lines.filter((line) => (length += line.length + between.length) <= MOST_TEXT)
  return [...fitting, ...(fitting.length < lines.length ? [rest] : [])].join(between)
}

/** As many of the texts as fit, the first in any case. */
function firstOf(texts: readonly string[]): string[] {
  let length = 0
  return texts.filter((text, index) => (length += text.length) <= MOST_TEXT || index === 0)
}

/** An amendment that went into the edition, and what somebody did for it. */
export interface AmendmentNews { id: string; title: string; part: 'author' | 'reviewer' }

function amendmentText({ id, title, part }: AmendmentNews, edition: number): string {
  const name = oneLine(title)
  return `${part === 'author' ? `Your amendment "${name}"` : `The amendment "${name}", which you reviewed,`} is published in edition ${edition}: ${page(`/curate/${encodeURIComponent(id)}`)}`
}

const things = (count: number): string => (count === 1 ? 'one thing' : `${count} things`)

function subjectOf(edition: number, news: readonly FollowedNews[], amendments: readonly AmendmentNews[]): string {
  const subjects = news.slice(0, 3).map(({ subject }) => subject).join(', ')
  const changes = `Edition ${edition} changes ${subjects}${news.length > 3 ? ` and ${news.length - 3} more` : ''}`
  const [first] = amendments
  if (first === undefined) return changes
  const others = amendments.length === 1 ? '' : ` and ${amendments.length - 1} more`
  const name = `${first.part === 'author' ? 'your amendment' : 'the amendment'} "${oneLine(first.title, 100)}"${others}`
  return news.length > 0 ? `${changes}, and holds ${name}` : `${name.charAt(0).toUpperCase()}${name.slice(1)} ${amendments.length === 1 ? 'is' : 'are'} published in edition ${edition}`
}

/** One mail to one person about an edition: the amendments that he or she wrote or reviewed, and everything followed that it changed. */
export function editionMail(edition: { edition: number; label: string; since: number }, name: string, news: readonly FollowedNews[], amendments: readonly AmendmentNews[] = []): Message {
  const comparison = page(`/editions/compare?from=${edition.since}&to=${edition.edition}`)
  const told = firstOf(news.slice(0, MOST_THINGS).map((one) => newsText(one, comparison)))
  const published = amendments.slice(0, MOST_THINGS).map((one) => amendmentText(one, edition.edition))
  const parts = [
    `Hello ${oneLine(name)},`,
    `Edition ${edition.edition} (${oneLine(edition.label)}) is published.${news.length === 0 ? '' : ` It changes ${things(news.length)} that you follow; values are those of edition ${edition.since} -> edition ${edition.edition}.`}`,
    ...(published.length === 0 ? [] : [published.join('\n')]),
    ...(amendments.length > published.length ? [`and ${amendments.length - published.length} more amendments of yours.`] : []),
    ...told,
    ...(news.length > told.length ? [`and ${news.length - told.length} more things that you follow.`] : []),
    edition.since < 1 ? `The edition: ${page(`/editions/${edition.edition}`)}` : `All changes: ${comparison}\nEdition ${edition.since} stays as it was: add edition=${edition.since} to any address.`,
    ...(news.length === 0 ? [] : [`You are told of values because you follow these things. What you follow: ${page('/following')}`]),
  ]
  return { subject: subjectOf(edition.edition, news, amendments), text: parts.join('\n\n') }
}
