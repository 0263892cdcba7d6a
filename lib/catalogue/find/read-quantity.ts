import { AIR_FROM_NM } from '@/lib/atomic/air'
import { formatHalf, parseHalf } from '@/lib/atomic/half'
import { spectralWindow } from '@/lib/catalogue/window'
import { nextAfter, type Question, type ReadPart, type Reader, type Reading, restFrom } from '@/lib/catalogue/find/wish'
import { withStretch } from '@/lib/catalogue/find/words'
import { readSpectralUnit, SPECTRAL_UNITS, type SpectralQuantity, type SpectralUnit, toWavenumber, vacuumNmOfWavenumber, wavenumberOfVacuumNm } from '@/lib/units/spectral'
import type { Medium } from '@/openapi/schemas/common'

const NUMBER = '(\\d+(?:\\.\\d*)?|\\.\\d+)'
const UNIT = '([A-Za-zÅÅåµμ/][A-Za-zÅÅåµμ]*(?:\\s?\\^?[-\\u2212\\u2013]1|⁻¹)?|1/cm)'
const RANGE = new RegExp(`^(?:(?:between|from)\\s+)?${NUMBER}\\s*(?:[-\\u2013\\u2014\\u2212]|\\.\\.+|to\\s|and\\s)\\s*${NUMBER}\\s*${UNIT}(?=$|[\\s,;:!?"')])`, 'u')
const AROUND = new RegExp(`^(~|≈|≃|about|near|around|circa|ca\\.)?\\s*${NUMBER}\\s*(?:(?:±|\\+/?-)\\s*${NUMBER}\\s*)?${UNIT}(?=$|[\\s,;:!?"')])`, 'u')
const ENERGY_BOUND = new RegExp(`^E\\s*(<=|>=|≤|≥|<|>)\\s*${NUMBER}\\s*${UNIT}(?=$|[\\s,;:!?"')])`, 'u')
const IN_MEDIUM = /^\s*,?\s*\(?(?:in\s+)?(air|vac|vacuum)\)?(?=$|[\s,;:!?"'])/i

/** A unit as people write it: the exact spelling, else one that only differs in capitals and can mean one thing. */
function unitOf(text: string): SpectralUnit | null {
  const plain = text.replace(/\s/g, '').replace(/[\u2212\u2013]/g, '-')
  const exact = readSpectralUnit(plain)
  if (exact) return exact
  const small = plain.toLowerCase()
  const known: Readonly<Record<string, SpectralUnit>> = { nm: 'nm', ev: 'eV', thz: 'THz', ghz: 'GHz', 'cm-1': 'cm-1', 'cm^-1': 'cm-1', å: 'Å', angstroms: 'Å', nanometers: 'nm', nanometres: 'nm' }
  return known[small] ?? null
}

/** One unit in the last digit written: 589.0 is good to 0.1. */
const lastDigit = (number: string): number => 10 ** -(number.split('.')[1]?.length ?? 0)

/** Widest reading of few digits, and narrowest of many, as parts of the value: `1 µm` is not 0 to 2, and a table is not good to 1e-7. */
const WIDEST = 0.02
const NARROWEST = 2e-6
const ABOUT = 0.01

const tidy = (value: number): string => String(Number(value.toPrecision(9)))

function windowPart(reading: Reading, next: number, unit: SpectralUnit, min: number, max: number): ReadPart {
  const quantity = SPECTRAL_UNITS[unit].quantity
  if (quantity !== 'wavelength') {
    const [minInvcm, maxInvcm] = [toWavenumber(min, unit), toWavenumber(max, unit)]
    const inUnit = `${tidy(min)} to ${tidy(max)} ${unit}`
    const also = unit === 'cm-1' ? '' : ` (${tidy(Number(minInvcm.toPrecision(7)))} to ${tidy(Number(maxInvcm.toPrecision(7)))} cm-1)`
    return {
      next,
      kind: 'energy',
      meaning: `levels at, and lines of, ${inUnit}${also}`,
      apply: (wish) => {
        wish.energy = wish.energy
          ? { minInvcm: Math.min(wish.energy.minInvcm, minInvcm), maxInvcm: Math.max(wish.energy.maxInvcm, maxInvcm), alsoIntervals: wish.energy.alsoIntervals }
          : { minInvcm, maxInvcm, alsoIntervals: true }
      },
    }
  }
  const rest = reading.query.slice(reading.words[next - 1]?.end ?? reading.query.length)
  const stated = IN_MEDIUM.exec(rest)
  const medium: Medium = stated === null ? 'conventional' : /^air$/i.test(stated[1] ?? '') ? 'air' : 'vacuum'
  const scale = SPECTRAL_UNITS[unit].toBase
  const [minNm, maxNm] = [Number((min * scale).toPrecision(15)), Number((max * scale).toPrecision(15))]
  const window = spectralWindow({ scale: 'wavelength', minNm, maxNm, medium })
  const where = medium === 'air' ? 'in air' : medium === 'vacuum' ? 'in vacuum' : maxNm < AIR_FROM_NM || minNm > 2000 ? 'in vacuum' : minNm > AIR_FROM_NM && maxNm < 2000 ? 'in air' : 'in air from 200 to 2000 nm, in vacuum outside'
  const after = stated === null ? next : (nextAfter(reading, next, 0) ?? reading.words.findIndex((word) => word.start >= (reading.words[next - 1]?.end ?? 0) + stated[0].length))
  return {
    next: after === -1 ? reading.words.length : after,
    kind: 'wavelength',
    meaning: `lines from ${tidy(min)} to ${tidy(max)} ${unit} ${where}`,
    apply: (wish) => void wish.windows.push({ window, centreInvcm: wavenumberOfVacuumNm((vacuumNmOfWavenumber(window.minInvcm) + vacuumNmOfWavenumber(window.maxInvcm)) / 2) }),
  }
}

function readRange(reading: Reading, at: number): ReadPart | null {
  const match = RANGE.exec(restFrom(reading, at))
  const unit = match ? unitOf(match[3] ?? '') : null
  const next = match ? nextAfter(reading, at, match[0].length) : null
  if (!match || unit === null || next === null) return null
  const [a, b] = [Number(match[1]), Number(match[2])]
  return a > 0 && b > 0 ? windowPart(reading, next, unit, Math.min(a, b), Math.max(a, b)) : null
}

function readAround(reading: Reading, at: number): ReadPart | null {
  const match = AROUND.exec(restFrom(reading, at))
  const unit = match ? unitOf(match[4] ?? '') : null
  const next = match ? nextAfter(reading, at, match[0].length) : null
  if (!match || unit === null || next === null) return null
  const [, about, text = '', spread] = match
  const value = Number(text)
  if (!Number.isFinite(value) || value <= 0) return null
  const byDigits = Math.max(Math.min(lastDigit(text), WIDEST * value), NARROWEST * value)
  const half = spread === undefined ? (about === undefined ? byDigits : ABOUT * value) : Number(spread)
  return windowPart(reading, next, unit, Math.max(value - half, value * 1e-6), value + half)
}

function readEnergyBound(reading: Reading, at: number): ReadPart | null {
  const match = ENERGY_BOUND.exec(restFrom(reading, at))
  const unit = match ? unitOf(match[3] ?? '') : null
  const next = match ? nextAfter(reading, at, match[0].length) : null
  if (!match || unit === null || next === null || SPECTRAL_UNITS[unit].quantity === 'wavelength') return null
  const invcm = toWavenumber(Number(match[2]), unit)
  const below = (match[1] ?? '').startsWith('<') || match[1] === '≤'
  return {
    next,
    kind: 'energy',
    meaning: `levels ${below ? 'up to' : 'from'} ${match[2] ?? ''} ${unit}${unit === 'cm-1' ? '' : ` (${tidy(Number(invcm.toPrecision(7)))} cm-1)`}`,
    apply: (wish) => {
      const now = wish.energy ?? { minInvcm: Number.NEGATIVE_INFINITY, maxInvcm: Number.POSITIVE_INFINITY, alsoIntervals: false }
      wish.energy = below ? { ...now, maxInvcm: Math.min(now.maxInvcm, invcm) } : { ...now, minInvcm: Math.max(now.minInvcm, invcm) }
    },
  }
}

/** Places in the spectrum with a unit: `589 nm`, `5889.95 Å`, `588-590 nm`, `589.0±0.2 nm`, `~589 nm`, `2.1 eV`, `E<20000 cm-1`. */
export const readQuantity: Reader = (reading, at) => readRange(reading, at) ?? readAround(reading, at) ?? readEnergyBound(reading, at)

const COMPARED = /^(g[\s_-]?eff|g(?:_?j)?(?:-factor)?|landé|lande|j|s|l)\s*(<=|>=|=<|=>|≤|≥|<|>|=)\s*(\d+\/\d+|\d+(?:\.\d*)?|\.\d+)(?=$|[\s,;:!?"'])/iu

interface Comparison {
  readonly min: { value: number; open?: boolean } | undefined
  readonly max: { value: number; open?: boolean } | undefined
  readonly words: string
}

function comparison(sign: string, number: string): Comparison {
  const value = number.includes('/') ? Number(number.split('/')[0]) / Number(number.split('/')[1]) : Number(number)
  if (sign === '=') {
    // g=3 is meant to be near 3: a whole number is read as if with one decimal
    const half = number.includes('/') ? 5e-4 : Math.min(lastDigit(number), 0.1) / 2
    return { min: { value: value - half }, max: { value: value + half }, words: `from ${tidy(value - half)} to ${tidy(value + half)}` }
  }
  const above = /[>≥]/.test(sign)
  const open = !/[=≤≥]/.test(sign)
  const bound = open ? { value, open } : { value }
  return { min: above ? bound : undefined, max: above ? undefined : bound, words: `${above ? (open ? 'above' : 'at least') : open ? 'below' : 'at most'} ${tidy(value)}` }
}

function quantumNumber(name: 'j' | 's' | 'l', sign: string, number: string, next: number): ReadPart | null {
  const two = parseHalf(number)
  if (sign !== '=' || !two.ok) return null
  const value = two.value
  if (name === 'j') return { next, kind: 'j', meaning: `J = ${formatHalf(value)}`, apply: (wish) => void wish.twoJ.push(value) }
  if (name === 's') return { next, kind: 'term', meaning: `S = ${formatHalf(value)}`, apply: (wish) => void (wish.twoS = value) }
  return value % 2 === 0 ? { next, kind: 'term', meaning: `L = ${value / 2}`, apply: (wish) => void (wish.l = value / 2) } : null
}

/** Comparisons: `g>2`, `g_eff >= 2.5`, `g=1.5` (to half a unit of its last digit), `j=3/2`, `S=1`. */
export const readComparison: Reader = (reading, at) => {
  const match = COMPARED.exec(restFrom(reading, at))
  const next = match ? nextAfter(reading, at, match[0].length) : null
  if (!match || next === null) return null
  const name = (match[1] ?? '').toLowerCase()
  const [sign, number] = [match[2] ?? '=', match[3] ?? '0']
  if (name === 'j' || name === 's' || name === 'l') return quantumNumber(name, sign, number, next)
  const { min, max, words } = comparison(sign, number)
  if (!Number.isFinite(min?.value ?? max?.value ?? 0)) return null
  if (name.endsWith('eff')) {
    return {
      next,
      kind: 'g',
      meaning: `lines with an effective Landé factor ${words}`,
      apply: (wish) => {
        wish.gEffMin = min ?? wish.gEffMin
        wish.gEffMax = max ?? wish.gEffMax
      },
    }
  }
  return {
    next,
    kind: 'g',
    meaning: `levels with g_J ${words}`,
    apply: (wish) => {
      wish.gMin = min ?? wish.gMin
      wish.gMax = max ?? wish.gMax
    },
  }
}

const SORT: Readonly<Record<SpectralQuantity, string>> = { wavelength: 'a wavelength', wavenumber: 'an energy, or the wavenumber of a line', energy: 'an energy', frequency: 'a frequency' }

/** Units a bare number may have been meant in, each with the values it is likely for. */
const LIKELY: readonly { unit: SpectralUnit; from: number; to: number }[] = [
  { unit: 'Å', from: 300, to: 500_000 },
  { unit: 'nm', from: 30, to: 50_000 },
  { unit: 'µm', from: 0.05, to: 30 },
  { unit: 'cm-1', from: 20, to: 3_000_000 },
  { unit: 'eV', from: 0.01, to: 100 },
  { unit: 'THz', from: 10, to: 10_000 },
]

/** A bare number is asked about, never guessed. */
export const readBareNumber: Reader = (reading, at) => {
  const word = reading.words[at]
  if (!word || !/^[~≈]?(?:\d+(?:\.\d*)?|\.\d+)$/.test(word.text)) return null
  const text = word.text.replace(/^[~≈]/, '')
  const value = Number(text)
  const instead = (replacement: string): string => withStretch(reading.query, word.start, word.end, replacement)
  const options = LIKELY.filter(({ from, to }) => value >= from && value <= to).map(({ unit }) => ({
    label: `${text} ${unit}, ${SORT[SPECTRAL_UNITS[unit].quantity]}`,
    q: instead(`${word.text} ${unit}`),
  }))
  const two = parseHalf(text)
  if (two.ok && two.value <= 30 && !/\.$/.test(text)) options.push({ label: `J = ${formatHalf(two.value)}`, q: instead(`j=${formatHalf(two.value)}`) })
  const question: Question = { text: `${text} of what? A number without a unit can be read in several ways.`, options }
  return {
    next: at + 1,
    kind: 'text',
    meaning: options.length === 0 ? `a number without a unit: not used` : 'a number without a unit: not used until you say what it is',
    apply: () => undefined,
    ...(options.length === 0 ? {} : { questions: [question] }),
  }
}
