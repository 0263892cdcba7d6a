import { type Configuration, parseConfiguration, parseConfigurationOf, printConfiguration } from '@/lib/atomic/configuration'
import { formatHalf, parseHalf } from '@/lib/atomic/half'
import { parseTerm, printLabelledTerm, type Term } from '@/lib/atomic/term'
import { configurationOccurs, type ConfigurationWanted } from '@/lib/catalogue/criteria'
import { withoutParents } from '@/lib/catalogue/search-index'
import { readQuantity } from '@/lib/catalogue/find/read-quantity'
import { isPaschenName, paschenQuestion } from '@/lib/catalogue/find/read-names'
import { type ReadPart, type Reader, type Reading, stretch } from '@/lib/catalogue/find/wish'

const sentence = (text: string): string => text.replace(/\.$/, '')

function describeTerm(term: Term): string {
  const what = term.twoJ === null ? 'term' : 'level'
  const parity = term.parity === null ? (term.kind === 'LS' ? ', either parity' : '') : ', odd'
  const label = term.label === null ? '' : ` with the label ${term.label}`
  const numbers = term.kind === 'LS' ? `: S = ${formatHalf(term.twoS)}, L = ${term.l}` : term.kind === 'J1K' ? `: K = ${formatHalf(term.twoK)} (pair coupling)` : ` (jj coupling)`
  return `${what} ${printLabelledTerm(term, 'unicode')}${label}${numbers}${term.twoJ === null ? '' : `, J = ${formatHalf(term.twoJ)}`}${parity}`
}

const termPart = (next: number, term: Term): ReadPart => ({ next, kind: 'term', meaning: describeTerm(term), apply: (wish) => void wish.terms.push(term) })

const LOOKS_LIKE_TERM = /^(?:[a-z]\s*)?(?:[\d⁰¹²³⁴-⁹]{1,3}\s*[A-Z]|[\d²]?\s*\[|\()/

/** A term in small letters is an orbital, unless a half-integer J makes it plain: `2p3/2`. */
const raised = (text: string): string | null => (/^\d[spdfghi](?:\*|o|°)?\d{1,2}\/2$/.test(text) ? text.replace(/^(\d)([a-z])/, (_, digit: string, letter: string) => `${digit}${letter.toUpperCase()}`) : null)

/** Terms and level symbols in any notation, the label before them or not, J run on or after a space: `2P*3/2`, `²P°₃/₂`, `z 5P*`, `5D 4`. */
export const readTerm: Reader = (reading, at) => {
  const { words } = reading
  const first = words[at]?.text ?? ''
  if (/^term$/i.test(first) && words[at + 1]) {
    const term = parseTerm(words[at + 1]?.text ?? '')
    return term.ok ? termPart(at + 2, term.value) : null
  }
  const labelled = /^[a-z]$/.test(first) && words[at + 1] !== undefined
  const next = labelled ? at + 2 : at + 1
  const text = labelled ? `${first} ${words[at + 1]?.text ?? ''}` : (raised(first) ?? first)
  if (!LOOKS_LIKE_TERM.test(text)) return null
  const term = parseTerm(text)
  if (!term.ok) {
    if (term.code !== 'term_impossible') return null
    return { next, kind: 'term', meaning: `not possible: ${sentence(term.detail)}`, apply: (wish) => void (wish.impossible = true) }
  }
  const j = words[next]?.text
  if (term.value.twoJ === null && j !== undefined && /^\d{1,2}(?:\/2|\.[05])?$/.test(j) && readQuantity(reading, next) === null) {
    const whole = parseTerm(`${text}${j}`)
    if (whole.ok && whole.value.twoJ !== null) return termPart(next + 1, whole.value)
  }
  return termPart(next, term.value)
}

const SHELLS = /^(?:\[[A-Za-z]{1,2}\]|\d|\()[\dA-Za-z[\]().*°⁰¹²³⁴-⁹/^]*$/u
const LONGEST = 8

/** A configuration read with the electrons of the one species named in mind, where there is one. */
function readConfigurationText({ snapshot, speciesNamed }: Reading, text: string) {
  const [only] = speciesNamed
  const species = speciesNamed.size === 1 && only !== undefined ? snapshot.species[only] : undefined
  if (!species) return parseConfiguration(text)
  const core = species.core_configuration === '' ? null : parseConfiguration(species.core_configuration)
  return parseConfigurationOf(text, { core: core?.ok ? core.value : null, z: species.z, charge: species.charge })
}

interface Candidate {
  readonly next: number
  readonly configuration: Configuration
  readonly wanted: ConfigurationWanted
}

function candidates(reading: Reading, at: number): Candidate[] {
  const found: Candidate[] = []
  let most = at
  while (most < reading.words.length && most < at + LONGEST && SHELLS.test(reading.words[most]?.text ?? '')) most += 1
  for (let next = most; next > at; next -= 1) {
    const read = readConfigurationText(reading, stretch(reading, at, next))
    if (!read.ok) continue
    const canonical = printConfiguration(read.value, 'canonical')
    found.push({ next, configuration: read.value, wanted: { canonical: canonical.includes('(') ? canonical : withoutParents(canonical), match: canonical.startsWith('[') ? 'whole' : 'part' } })
  }
  return found
}

/** Configurations with or without dots, spaces and parents: `3p`, `3d6 4s2`, `3d6(5D)4s4p(3P)`. */
export const readConfiguration: Reader = (reading, at) => {
  const { words } = reading
  const keyword = /^configuration$/i.test(words[at]?.text ?? '')
  const begin = keyword ? at + 1 : at
  const word = words[begin]
  if (!word || !SHELLS.test(word.text) || word.text.startsWith('(') || !/[a-z]/.test(word.text)) return null
  const all = candidates(reading, begin)
  // shells in several words are one configuration where the edition holds it, else the first word stands alone
  const chosen = all.find(({ wanted }) => configurationOccurs(reading.snapshot, wanted, reading.speciesNamed)) ?? all[0]
  if (!chosen) {
    const read = readConfigurationText(reading, word.text)
    if (read.ok || read.code !== 'configuration_impossible') return null
    return { next: begin + 1, kind: 'configuration', meaning: `not possible: ${sentence(read.detail)}`, apply: (wish) => void (wish.impossible = true) }
  }
  const printed = printConfiguration(chosen.configuration, 'unicode')
  const asked = !keyword && chosen.next === begin + 1 && isPaschenName(reading, word.text)
  return {
    next: chosen.next,
    kind: 'configuration',
    meaning: chosen.wanted.match === 'whole' ? `configuration ${printed}` : `configurations that are or contain ${printed}`,
    apply: (wish) => void wish.configurations.push(chosen.wanted),
    ...(asked ? { questions: [paschenQuestion(reading, word.start, word.end, word.text)] } : {}),
  }
}

/** `odd`, `even parity`, and a J alone where it is half an odd number: `3/2`. */
export const readParityOrJ: Reader = ({ words }, at) => {
  const text = words[at]?.text ?? ''
  if (/^(?:odd|even)$/i.test(text)) {
    const parity = text.toLowerCase() === 'odd' ? 'odd' : 'even'
    return { next: /^parity$/i.test(words[at + 1]?.text ?? '') ? at + 2 : at + 1, kind: 'parity', meaning: `${parity} parity`, apply: (wish) => void (wish.parity = parity) }
  }
  const spaced = /^j$/i.test(text) && words[at + 1] !== undefined
  const number = spaced ? (words[at + 1]?.text ?? '') : text
  if (!(spaced ? /^\d{1,2}(?:\/[12]|\.[05])?$/ : /^\d{1,2}\/2$/).test(number)) return null
  const two = parseHalf(number)
  if (!two.ok) return null
  return { next: spaced ? at + 2 : at + 1, kind: 'j', meaning: `J = ${formatHalf(two.value)}`, apply: (wish) => void wish.twoJ.push(two.value) }
}
