import { wordOccurs } from '@/lib/catalogue/criteria'
import type { Snapshot } from '@/lib/catalogue/shape'
import { readIdentifier, readPaschen, readTradeName } from '@/lib/catalogue/find/read-names'
import { readBareNumber, readComparison, readQuantity } from '@/lib/catalogue/find/read-quantity'
import { readSpecies } from '@/lib/catalogue/find/read-species'
import { readConfiguration, readParityOrJ, readTerm } from '@/lib/catalogue/find/read-term'
import { emptyWish, type ReadPart, type Reader, type Reading, type Wish } from '@/lib/catalogue/find/wish'
import { withoutStretch, wordsOf } from '@/lib/catalogue/find/words'
import type { Find } from '@/openapi/schemas/find'

export type Understood = Find['understood'][number]

export interface Understanding {
  readonly understood: Understood[]
  readonly questions: Find['questions']
  readonly wish: Wish
  /** At least one part asks for something; else there is nothing to list. */
  readonly asks: boolean
}

const JOINING = /^(?:lines?|levels?|transitions?|terms?|configurations?|wavelengths?|energ(?:y|ies)|parity|the|an?|of|in|at|and|or|to|from|near|with|for|between|air|vac|vacuum|λ|lambda|[-–—→~+&|/.<>=]+)$/i

/** Words that join the others, and say nothing alone. */
const readJoining: Reader = ({ words }, at) =>
  JOINING.test(words[at]?.text ?? '') ? { next: at + 1, kind: 'text', meaning: 'a joining word: not needed', apply: () => undefined } : null

/** Whatever is left is looked for as it stands in configurations, symbols, names and notes. */
const readText: Reader = ({ snapshot, words }, at) => {
  const text = words[at]?.text ?? ''
  const found = wordOccurs(snapshot, text)
  return {
    next: at + 1,
    kind: 'text',
    meaning: found ? `levels that mention “${text}”` : `not understood, and nothing in this edition mentions “${text}”`,
    apply: (wish) => void wish.words.push(text),
  }
}

/** In order of certainty: the first that reads a part at a word has it. */
const READERS: readonly Reader[] = [
  readIdentifier, readComparison, readQuantity, readTradeName, readSpecies, readPaschen, readTerm, readConfiguration, readParityOrJ, readBareNumber, readJoining, readText,
]

function readAll(reading: Reading): { at: number; part: ReadPart }[] {
  const parts: { at: number; part: ReadPart }[] = []
  for (let at = 0; at < reading.words.length; ) {
    let part: ReadPart | null = null
    for (const reader of READERS) {
      part = reader(reading, at)
      if (part) break
    }
    // the last reader takes any word, so a part is always found; the guard keeps the walk moving whatever happens
    if (!part || part.next <= at) part = { next: at + 1, kind: 'text', meaning: 'not understood', apply: () => undefined }
    parts.push({ at, part })
    at = part.next
  }
  return parts
}

const asksNothing = ({ part }: { part: ReadPart }): boolean => part.kind === 'text' && !part.meaning.startsWith('levels that') && !part.meaning.startsWith('not understood, and')

/**
 * Reads a query of the one search box. Every word ends up in exactly one part, and every part says what it was taken to mean;
 * what can be read in more than one way is asked about in `questions`. Never fails: any text has an answer.
 */
export function understand(snapshot: Snapshot, query: string): Understanding {
  const words = wordsOf(query)
  const first = readAll({ snapshot, query, words, speciesNamed: new Set() })
  const named = emptyWish()
  for (const { part } of first) if (part.kind === 'species') part.apply(named)
  const speciesNamed = named.species ?? new Set<number>()
  const reading: Reading = { snapshot, query, words, speciesNamed }
  // a second time with the species in mind: "K D1" is potassium's line, "Ne 2p5" a level of neon
  const parts = speciesNamed.size === 0 ? first : readAll(reading)
  const wish = emptyWish()
  const understood = parts.map(({ at, part }): Understood => {
    const [start, end] = [words[at]?.start ?? 0, words[part.next - 1]?.end ?? query.length]
    part.apply(wish)
    return { kind: part.kind, text: query.slice(start, end), meaning: part.meaning, without: withoutStretch(query, start, end) }
  })
  return { understood, questions: parts.flatMap(({ part }) => part.questions ?? []), wish, asks: parts.some((part) => !asksNothing(part)) }
}
