import { quoted } from '@/lib/units/number'
import { type Parsed, parsed, refused } from '@/lib/atomic/errors'

const TABLE =
  'H hydrogen,He helium,Li lithium,Be beryllium,B boron,C carbon,N nitrogen,O oxygen,F fluorine,Ne neon,Na sodium,Mg magnesium,Al aluminium,Si silicon,P phosphorus,S sulfur,Cl chlorine,Ar argon,' +
  'K potassium,Ca calcium,Sc scandium,Ti titanium,V vanadium,Cr chromium,Mn manganese,Fe iron,Co cobalt,Ni nickel,Cu copper,Zn zinc,Ga gallium,Ge germanium,As arsenic,Se selenium,Br bromine,Kr krypton,' +
  'Rb rubidium,Sr strontium,Y yttrium,Zr zirconium,Nb niobium,Mo molybdenum,Tc technetium,Ru ruthenium,Rh rhodium,Pd palladium,Ag silver,Cd cadmium,In indium,Sn tin,Sb antimony,Te tellurium,I iodine,Xe xenon,' +
  'Cs caesium,Ba barium,La lanthanum,Ce cerium,Pr praseodymium,Nd neodymium,Pm promethium,Sm samarium,Eu europium,Gd gadolinium,Tb terbium,Dy dysprosium,Ho holmium,Er erbium,Tm thulium,Yb ytterbium,Lu lutetium,' +
  'Hf hafnium,Ta tantalum,W tungsten,Re rhenium,Os osmium,Ir iridium,Pt platinum,Au gold,Hg mercury,Tl thallium,Pb lead,Bi bismuth,Po polonium,At astatine,Rn radon,' +
  'Fr francium,Ra radium,Ac actinium,Th thorium,Pa protactinium,U uranium,Np neptunium,Pu plutonium,Am americium,Cm curium,Bk berkelium,Cf californium,Es einsteinium,Fm fermium,Md mendelevium,No nobelium,Lr lawrencium,' +
  'Rf rutherfordium,Db dubnium,Sg seaborgium,Bh bohrium,Hs hassium,Mt meitnerium,Ds darmstadtium,Rg roentgenium,Cn copernicium,Nh nihonium,Fl flerovium,Mc moscovium,Lv livermorium,Ts tennessine,Og oganesson'

export interface Element {
  readonly z: number
  readonly symbol: string
  readonly name: string
}

/** Elements in order of Z, index Z - 1; symbols and names as IUPAC gives them. */
export const ELEMENTS: readonly Element[] = TABLE.split(',').map((row, index) => {
  const [symbol = '', name = ''] = row.split(' ')
  return { z: index + 1, symbol, name }
})

const OTHER_NAMES: Record<string, string> = { aluminum: 'Al', cesium: 'Cs', sulphur: 'S', wolfram: 'W' }
const bySymbol = new Map(ELEMENTS.map((element) => [element.symbol, element]))
const byFoldedSymbol = new Map(ELEMENTS.map((element) => [element.symbol.toLowerCase(), element]))
const byName = new Map(ELEMENTS.map((element) => [element.name, element]))
for (const [name, symbol] of Object.entries(OTHER_NAMES)) {
  const element = bySymbol.get(symbol)
  if (element) byName.set(name, element)
}

export const elementBySymbol = (symbol: string): Element | null => bySymbol.get(symbol) ?? null
export const elementByZ = (z: number): Element | null => ELEMENTS[z - 1] ?? null

/** The closed shells that a noble gas's symbol in brackets stands for, in the order written before the open shells. */
export const NOBLE_GAS_CORES: Readonly<Record<string, string>> = {
  He: '1s2',
  Ne: '1s2.2s2.2p6',
  Ar: '1s2.2s2.2p6.3s2.3p6',
  Kr: '1s2.2s2.2p6.3s2.3p6.3d10.4s2.4p6',
  Xe: '1s2.2s2.2p6.3s2.3p6.3d10.4s2.4p6.4d10.5s2.5p6',
  Rn: '1s2.2s2.2p6.3s2.3p6.3d10.4s2.4p6.4d10.4f14.5s2.5p6.5d10.6s2.6p6',
}

const ROMAN: readonly [number, string][] = [
  [100, 'C'], [90, 'XC'], [50, 'L'], [40, 'XL'], [10, 'X'], [9, 'IX'], [5, 'V'], [4, 'IV'], [1, 'I'],
]

/** Stage 1 -> `I`, 26 -> `XXVI`. */
export function toRoman(stage: number): string {
  let left = stage
  let text = ''
  for (const [value, numeral] of ROMAN) {
    while (left >= value) {
      text += numeral
      left -= value
    }
  }
  return text
}

/** `IV` -> 4 (either case); null when it is not a proper numeral (`IIII`, `VX`). */
export function fromRoman(text: string): number | null {
  const upper = text.toUpperCase()
  if (!/^[IVXLC]{1,12}$/.test(upper)) return null
  let rest = upper
  let stage = 0
  for (const [value, numeral] of ROMAN) {
    while (rest.startsWith(numeral)) {
      stage += value
      rest = rest.slice(numeral.length)
    }
  }
  return rest === '' && toRoman(stage) === upper ? stage : null
}

/** A stage of ionisation of an element: Na I is neutral, Fe II singly charged. */
export interface SpeciesName {
  /** `Na-I`, as used in identifiers and addresses. */
  id: string
  element: string
  z: number
  /** 1 for neutral. */
  stage: number
  charge: number
  /** `Na I`, as printed. */
  name: string
  elementName: string
}

function make(element: Element, stage: number): Parsed<SpeciesName> {
  if (stage > element.z) {
    return refused('species_impossible', `${element.symbol} ${toRoman(stage)} has no electron left: ${element.name} (Z = ${element.z}) has stages I to ${toRoman(element.z)}.`)
  }
  const roman = toRoman(stage)
  return parsed({ id: `${element.symbol}-${roman}`, element: element.symbol, z: element.z, stage, charge: stage - 1, name: `${element.symbol} ${roman}`, elementName: element.name })
}

const readElement = (text: string): Element | null => bySymbol.get(text) ?? byFoldedSymbol.get(text.toLowerCase()) ?? byName.get(text.toLowerCase()) ?? null

/** The charge written after an element: `+`, `++`, `2+`, `+2`, superscripts too. Null when it is none. */
function readCharge(text: string): number | null {
  const plain = text.replace(/[⁰¹²³⁴-⁹]/g, (d) => String('⁰¹²³⁴⁵⁶⁷⁸⁹'.indexOf(d))).replace(/⁺/g, '+')
  if (/^\++$/.test(plain)) return plain.length
  const counted = /^(?:(\d{1,3})\+|\+(\d{1,3}))$/.exec(plain)
  return counted ? Number(counted[1] ?? counted[2]) : null
}

/** Letters run together with a stage: `NaI`, `FeII`, `nai`. Capitals decide first (NI is nitrogen I, Ni is nickel). */
function splitAsWritten(text: string): { element: Element; stage: number } | null {
  const match = /^([A-Z][a-z]?)([IVXLC]+)$/.exec(text)
  return match ? firstThatReads([[match[1] ?? '', match[2] ?? '']]) : null
}

const splitFolded = (text: string) => firstThatReads([[text.slice(0, 2), text.slice(2)], [text.slice(0, 1), text.slice(1)]])

function firstThatReads(tries: readonly (readonly [string, string])[]): { element: Element; stage: number } | null {
  for (const [symbol, numeral] of tries) {
    const element = bySymbol.get(symbol) ?? byFoldedSymbol.get(symbol.toLowerCase())
    const stage = fromRoman(numeral)
    if (element && stage !== null) return { element, stage }
  }
  return null
}

/**
 * Reads a species: `Na-I`, `Na I`, `NaI`, `na i`, `sodium` (neutral), `iron II`, `Fe+`, `Fe2+`.
 * Errors: `species_malformed`, `element_unknown`, `stage_malformed`; `species_impossible` (no electron left).
 */
export function parseSpecies(text: string): Parsed<SpeciesName> {
  const clean = text.trim().replace(/\s+/g, ' ')
  if (clean === '' || clean.length > 40) return refused('species_malformed', `${quoted(text)} is not a species; write an element and its stage, such as Na-I, Fe II or sodium.`)
  const charged = /^([A-Za-z]+)[ -]?([\d⁰¹²³⁴-⁹]*[+⁺]+[\d]*)$/.exec(clean)
  if (charged) {
    const element = readElement(charged[1] ?? '')
    const charge = readCharge(charged[2] ?? '')
    if (element && charge !== null) return make(element, charge + 1)
  }
  const parts = /^([A-Za-z]+)(?:[ _-]([A-Za-z0-9]+))?$/.exec(clean)
  if (!parts) return refused('species_malformed', `${quoted(text)} is not a species; write an element and its stage, such as Na-I, Fe II or sodium.`)
  const [word = '', stageText] = [parts[1], parts[2]]
  if (stageText === undefined) {
    const exact = bySymbol.get(word) ?? byName.get(word.toLowerCase())
    if (exact) return make(exact, 1)
    const written = splitAsWritten(word)
    if (written) return make(written.element, written.stage)
    const folded = byFoldedSymbol.get(word.toLowerCase())
    if (folded) return make(folded, 1)
    const together = splitFolded(word)
    if (together) return make(together.element, together.stage)
    return refused('element_unknown', `${quoted(word)} is not an element; write its symbol or English name, such as Na or sodium.`)
  }
  const element = readElement(word)
  if (!element) return refused('element_unknown', `${quoted(word)} is not an element; write its symbol or English name, such as Na or sodium.`)
  const stage = fromRoman(stageText)
  if (stage === null) return refused('stage_malformed', `${quoted(stageText)} is not a stage of ionisation; ${element.symbol} I is neutral, ${element.symbol} II singly charged, and so on in Roman numerals.`)
  return make(element, stage)
}
