import { Cite, plugins } from '@citation-js/core'
import '@citation-js/plugin-bibtex'
import { getConfig } from '@/lib/config'
import type { Citation, Edition } from '@/openapi/schemas/edition'
import type { Source } from '@/openapi/schemas/source'

// keys are ours, and letters beyond ASCII stay as they are: TeX has read UTF-8 for long
Object.assign(plugins.config.get('@bibtex').format, { useIdAsLabel: true, checkLabel: false, asciiOnly: false })

interface Name { family?: string; given?: string; literal?: string }

const INITIALS = /^(?:\p{Lu}\p{Ll}?\.[ -]?)+$/u
const GIVEN_FIRST = /^((?:\p{Lu}\p{Ll}?\.[ -]?)+)\s*(\S.*)$/u
const OTHERS = /,?\s*(?:et al\.?|and others)$/i

/** One person: `J. E. Martin`, `Martin, J. E.`, or `Martin`. */
function nameOf(text: string): Name {
  const [family, ...given] = text.split(',').map((part) => part.trim())
  if (given.length > 0 && family !== undefined) return { family, given: given.join(', ') }
  const first = GIVEN_FIRST.exec(text)
  return first?.[1] !== undefined && first[2] !== undefined ? { family: first[2], given: first[1].trim() } : { family: text }
}

/**
 * The people behind a source, from the text that names them: parted by `;` or `and` with commas inside a name, or by commas and `&`
 * (initials that stand alone belong to the name before). `et al.` is told apart.
 */
export function readAuthors(text: string): { names: Name[]; others: boolean } {
  const others = OTHERS.test(text)
  const plain = text.replace(OTHERS, '').trim()
  if (plain === '') return { names: [], others }
  if (/;|\sand\s/.test(plain)) return { names: plain.split(/\s*;\s*|\s+and\s+/).filter((part) => part !== '').map(nameOf), others }
  const names: string[] = []
  for (const part of plain.split(/\s*[,&]\s*/).filter((one) => one !== '')) {
    const last = names.length - 1
    if (INITIALS.test(part) && last >= 0) names[last] = `${names[last]}, ${part}`
    else names.push(part)
  }
  return { names: names.map(nameOf), others }
}

/** `J. Phys. Chem. Ref. Data 37, 1659` is a journal, a volume and a page; anything else is a title of its own. */
function placeOf(journal: string): Record<string, string> {
  const read = /^(.*[^\d\s,])\s+(\d+[A-Za-z]?)\s*,\s*([A-Za-z]?\d[\w\u2013-]*)$/u.exec(journal.trim())
  return read === null ? { 'container-title': journal } : { 'container-title': read[1] ?? '', volume: read[2] ?? '', page: read[3] ?? '' }
}

const TYPES: Record<Source['kind'], string> = { article: 'article-journal', report: 'report', book: 'book', 'data sheet': 'dataset', abstract: 'paper-conference', other: 'document' }

const known = (fields: Record<string, unknown>): Record<string, unknown> => Object.fromEntries(Object.entries(fields).filter(([, value]) => value !== null && value !== undefined))

type Item = Record<string, unknown>

/** Control characters have no place in a bibliography. */
const clean = (text: string): string => text.replaceAll(/[\u0000-\u001f\u007f]+/g, ' ')
const cleaned = (value: unknown): unknown =>
  typeof value === 'string' ? clean(value) : Array.isArray(value) ? value.map(cleaned) : typeof value === 'object' && value !== null ? Object.fromEntries(Object.entries(value).map(([key, inner]) => [key, cleaned(inner)])) : value

/** What TeX takes for its own, and how it is written to stand for itself. */
const TEX: readonly (readonly [string, string])[] = [
  ['\\', '\\textbackslash{}'], ['{', '\\{'], ['}', '\\}'], ['&', '\\&'], ['%', '\\%'], ['#', '\\#'], ['$', '\\$'], ['_', '\\_'], ['~', '\\textasciitilde{}'], ['^', '\\textasciicircum{}'],
]
/** Stand-ins from the private use area: the library puts braces of its own between, which must stay what they are. */
const standIn = (at: number): string => String.fromCharCode(0xe000 + at)
const hidden = (text: string): string => text.replaceAll(/[\\{}&%#$_~^\ue000-\ue009]/g, (mark) => (mark >= '\ue000' ? '' : standIn(TEX.findIndex(([plain]) => plain === mark))))
const shown = (text: string): string => text.replaceAll(/[\ue000-\ue009]/g, (mark) => TEX[mark.charCodeAt(0) - 0xe000]?.[1] ?? '')

/** Fields that BibTeX takes as they are. */
const VERBATIM = new Set(['id', 'type', 'URL', 'DOI', 'issued', 'page', 'volume'])
const hiddenIn = (value: unknown): unknown =>
  typeof value === 'string' ? hidden(value) : Array.isArray(value) ? value.map(hiddenIn) : typeof value === 'object' && value !== null ? Object.fromEntries(Object.entries(value).map(([key, inner]) => [key, hiddenIn(inner)])) : value

function bibtexOf(item: Item, others: boolean): string {
  const author = Array.isArray(item.author) ? (item.author as Name[]) : []
  const whole = others && author.length > 0 ? { ...item, author: [...author, { family: 'others' }] } : item
  const text = new Cite([Object.fromEntries(Object.entries(whole).map(([name, value]) => [name, VERBATIM.has(name) ? value : hiddenIn(value)]))]).format('bibtex')
  return shown(text.split('\n').filter((line) => !/^\s*howpublished = /.test(line)).join('\n').replace(' and {others}', ' and others')).trim()
}

const citation = (text: string, given: Item, others = false): Citation => {
  const item = cleaned(given) as Item
  return { text: clean(text), bibtex: bibtexOf(item, others), csl_json: item }
}

/** How to cite one source of the table. */
export function citeSource(source: Omit<Source, 'used_by'>): Citation {
  const { names, others } = readAuthors(source.authors ?? '')
  const title = source.title ?? (source.journal === null || names.length === 0 ? source.citation : null)
  const item = known({
    id: source.key, type: TYPES[source.kind], title, author: names.length > 0 ? names : null, ...(source.journal === null ? {} : placeOf(source.journal)),
    issued: source.year === null ? null : { 'date-parts': [[source.year]] }, DOI: source.doi, URL: source.doi === null ? null : `https://doi.org/${source.doi}`,
    note: others ? 'The list of authors goes on.' : null,
  })
  return citation(source.doi === null ? source.citation : `${source.citation}, https://doi.org/${source.doi}`, item, others)
}

/** How to cite an edition. Its checksum says which copy of the table was used. */
export function citeEdition(edition: Pick<Edition, 'number' | 'label' | 'checksum' | 'published_at'>): Citation {
  const url = `${getConfig().baseUrl}/editions/${edition.number}`
  const [year, month] = edition.published_at.slice(0, 10).split('-').map(Number)
  const title = `Lodeterm, a reviewed table of atomic levels, edition ${edition.number} (${edition.label})`
  const item = {
    id: `lodeterm-edition-${edition.number}`, type: 'dataset', title, publisher: 'Lodeterm', version: String(edition.number), issued: { 'date-parts': [[year, month]] },
    URL: url, note: `SHA-256 ${edition.checksum}`,
  }
  return citation(`${title}, published ${edition.published_at.slice(0, 10)}, ${url}, SHA-256 ${edition.checksum}.`, item)
}
