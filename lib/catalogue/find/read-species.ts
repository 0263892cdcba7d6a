import { ELEMENTS, elementBySymbol, fromRoman, parseSpecies } from '@/lib/atomic/elements'
import type { Snapshot } from '@/lib/catalogue/shape'
import { addTo, type ReadPart, type Reader, stretch } from '@/lib/catalogue/find/wish'

const stagesOf = (snapshot: Snapshot, element: string): number[] => snapshot.species.flatMap((species, index) => (species.element === element ? [index] : []))

const NAMES = new Map<string, string>(ELEMENTS.map(({ name, symbol }) => [name, symbol]))
for (const [name, symbol] of [['aluminum', 'Al'], ['cesium', 'Cs'], ['sulphur', 'S'], ['natrium', 'Na'], ['kalium', 'K']] as const) NAMES.set(name, symbol)
const ELEMENT_NAMES = new Map(ELEMENTS.map(({ name, symbol }) => [symbol, name]))

/** The element a word alone names: its English name in any case, its symbol with a capital, or in small letters where the table has it. */
function elementAlone(snapshot: Snapshot, text: string): string | null {
  const named = NAMES.get(text.toLowerCase())
  if (named !== undefined) return named
  if (elementBySymbol(text)) return text
  if (!/^[a-z]{2}$/i.test(text)) return null
  const symbol = `${text.slice(0, 1).toUpperCase()}${text.slice(1).toLowerCase()}`
  return elementBySymbol(symbol) && stagesOf(snapshot, symbol).length > 0 ? symbol : null
}

const charged = /^[A-Z][a-z]?[\d⁰¹²³⁴-⁹]*[+⁺]+\d*$/
const together = /^(?:[A-Z][a-z]?-?[IVXLC]+|[a-z]{1,2}-[ivxlc]+)$/

/** A word that is a species with its stage: `Na-I`, `FeII`, `Ca+`, `nai` where the table has it. */
function speciesInOneWord(snapshot: Snapshot, text: string): string | null {
  const read = parseSpecies(text)
  if (!read.ok) return null
  if (charged.test(text) || together.test(text)) return read.value.id
  return /^[a-z]{2,6}$/i.test(text) && snapshot.speciesIndex.has(read.value.id) && !NAMES.has(text.toLowerCase()) ? read.value.id : null
}

function ion(snapshot: Snapshot, id: string, next: number): ReadPart {
  const index = snapshot.speciesIndex.get(id)
  const read = parseSpecies(id)
  const name = read.ok ? `${read.value.name} (${read.value.elementName}${read.value.charge === 0 ? ', neutral' : `, charge +${read.value.charge}`})` : id
  if (index === undefined) return { next, kind: 'species', meaning: `${name}: not in this edition`, apply: (wish) => void (wish.impossible = true) }
  return { next, kind: 'species', meaning: name, apply: (wish) => void (wish.species = addTo(wish.species, [index])) }
}

function allStages(snapshot: Snapshot, symbol: string, next: number): ReadPart {
  const indices = stagesOf(snapshot, symbol)
  const name = ELEMENT_NAMES.get(symbol) ?? symbol
  if (indices.length === 0) return { next, kind: 'species', meaning: `${name} (${symbol}): not in this edition`, apply: (wish) => void (wish.impossible = true) }
  const stages = indices.map((index) => `${symbol} ${snapshot.species[index]?.stage ?? ''}`)
  return {
    next,
    kind: 'species',
    meaning: `${name}, ${stages.length === 1 ? 'the one stage' : 'all stages'} in this edition: ${stages.join(', ')}`,
    apply: (wish) => void (wish.species = addTo(wish.species, indices)),
  }
}

/** Ions (`Na I`, `iron II`, `Na-I`, `NaI`, `Ca+`) and elements alone, which stand for all their stages. */
export const readSpecies: Reader = (reading, at) => {
  const { snapshot, words } = reading
  const [first, second] = [words[at]?.text ?? '', words[at + 1]?.text]
  if (!/^[A-Za-z]/.test(first)) return null
  if (second !== undefined && fromRoman(second) !== null && (/^[IVXLC]+$/.test(second) || /^[ivx]+$/.test(second))) {
    const read = parseSpecies(stretch(reading, at, at + 2))
    // a misspelt stage (Na XIII) still names a species; it is simply not there
    if (read.ok) return ion(snapshot, read.value.id, at + 2)
    if (read.code === 'species_impossible') return { next: at + 2, kind: 'species', meaning: read.detail, apply: (wish) => void (wish.impossible = true) }
  }
  const alone = elementAlone(snapshot, first)
  if (alone !== null && (first.length > 1 || elementBySymbol(first) !== null)) return allStages(snapshot, alone, at + 1)
  const id = speciesInOneWord(snapshot, first)
  return id === null ? null : ion(snapshot, id, at + 1)
}
