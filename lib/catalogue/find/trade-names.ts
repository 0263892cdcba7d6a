/**
 * Names that spectroscopists give to lines. All are common practice of the trade, found in any textbook, so no one source is named.
 * A line is described by its levels, never by a wavelength, so that its position always comes from the edition read.
 */
export interface EndPattern {
  /** Canonical configurations, any of them. */
  readonly configurations?: readonly string[]
  /** Level symbols without label, any of them. */
  readonly terms?: readonly string[]
  /** Second name, such as Paschen's. */
  readonly name?: string
}

export interface TradeName {
  /** What it is called in full. */
  readonly title: string
  /** As typed; compared without case, spaces and hyphens, Greek letters spelt out. */
  readonly names: readonly string[]
  readonly species: string
  readonly lower: EndPattern
  readonly upper: EndPattern
}

const end = (configuration: string, ...terms: string[]): EndPattern => (terms.length === 0 ? { configurations: [configuration] } : { configurations: [configuration], terms })
const shell = (n: number): EndPattern => ({ configurations: ['s', 'p', 'd', 'f'].slice(0, n).map((letter) => `${n}${letter}`) })

const ALKALI = [['Li', 'lithium', 2], ['Na', 'sodium', 3], ['K', 'potassium', 4], ['Rb', 'rubidium', 5], ['Cs', 'caesium', 6]] as const

/** D1, D2 and both, for each alkali atom. Alone, "D1" is sodium's. */
const D_LINES: readonly TradeName[] = ALKALI.flatMap(([symbol, element, n]): TradeName[] => {
  const [species, lower] = [`${symbol}-I`, end(`${n}s`, '2S1/2')]
  const named = (what: string): string[] => [`${symbol} ${what}`, `${symbol} I ${what}`, `${element} ${what}`, `${symbol} ${what} line`, `${element} ${what} line`, ...(symbol === 'Na' ? [what, `${what} line`] : [])]
  return [
    { title: `${element} D1 line`, names: named('D1'), species, lower, upper: end(`${n}p`, '2P*1/2') },
    { title: `${element} D2 line`, names: named('D2'), species, lower, upper: end(`${n}p`, '2P*3/2') },
    { title: `${element} D lines`, names: [`${symbol} D`, `${symbol} I D`, `${element} D`, ...['D lines', 'D doublet'].flatMap(named)], species, lower, upper: end(`${n}p`) },
  ]
})

const HYDROGEN: readonly TradeName[] = ([
  [1, 'Lyman', 'Ly', ['alpha', 'beta', 'gamma']],
  [2, 'Balmer', 'H', ['alpha', 'beta', 'gamma']],
  [3, 'Paschen', 'Pa', ['alpha', 'beta']],
] as const).flatMap(([n, series, short, letters]) =>
  letters.map((letter, at): TradeName => ({
    title: `hydrogen ${series} ${letter}`,
    names: [`${short}-${letter}`, `${series} ${letter}`, `hydrogen ${series} ${letter}`, `H I ${short} ${letter}`, `${short} ${letter} line`, ...(n === 2 ? [`hydrogen ${letter}`, `H I ${letter}`] : [])],
    species: 'H-I',
    lower: shell(n),
    upper: shell(n + 1 + at),
  })),
)

const triplet = (title: string, element: readonly string[], colour: readonly string[], species: string, lower: EndPattern, upper: EndPattern): TradeName => ({
  title,
  names: element.flatMap((e) => colour.flatMap((c) => [`${c} ${e} line`, `${e} ${c} line`, `${e} ${c}`, `${c} ${e}`])),
  species,
  lower,
  upper,
})

const MERCURY = ['mercury', 'Hg', 'Hg I'] as const
const CADMIUM = ['cadmium', 'Cd', 'Cd I'] as const
const ZINC = ['zinc', 'Zn', 'Zn I'] as const

const LAMPS: readonly TradeName[] = [
  triplet('mercury green line', MERCURY, ['green', 'e'], 'Hg-I', end('6s.6p', '3P*2'), end('6s.7s', '3S1')),
  triplet('mercury blue line', MERCURY, ['blue'], 'Hg-I', end('6s.6p', '3P*1'), end('6s.7s', '3S1')),
  triplet('mercury violet line', MERCURY, ['violet'], 'Hg-I', end('6s.6p', '3P*0'), end('6s.7s', '3S1')),
  triplet('mercury yellow lines', MERCURY, ['yellow'], 'Hg-I', end('6s.6p', '1P*1'), end('6s.6d')),
  triplet('mercury ultraviolet resonance line', MERCURY, ['ultraviolet', 'UV', 'resonance', 'ultraviolet resonance', 'UV resonance'], 'Hg-I', { configurations: ['6s2'] }, end('6s.6p', '3P*1')),
  triplet('cadmium red line', CADMIUM, ['red'], 'Cd-I', end('5s.5p', '1P*1'), end('5s.5d', '1D2')),
  triplet('cadmium green line', CADMIUM, ['green'], 'Cd-I', end('5s.5p', '3P*2'), end('5s.6s', '3S1')),
  triplet('cadmium blue line', CADMIUM, ['blue'], 'Cd-I', end('5s.5p', '3P*1'), end('5s.6s', '3S1')),
  triplet('zinc red line', ZINC, ['red'], 'Zn-I', end('4s.4p', '1P*1'), end('4s.4d', '1D2')),
  triplet('zinc blue lines', ZINC, ['blue'], 'Zn-I', end('4s.4p'), end('4s.5s', '3S1')),
  triplet('lithium red lines', ['lithium', 'Li', 'Li I'], ['red'], 'Li-I', end('2s'), end('2p')),
  triplet('strontium blue line', ['strontium', 'Sr', 'Sr I'], ['blue', 'resonance'], 'Sr-I', end('5s2'), end('5s.5p', '1P*1')),
  { title: 'helium-neon laser line', names: ['He-Ne', 'He-Ne laser', 'He-Ne laser line', 'HeNe line', 'helium neon laser', 'neon laser line'], species: 'Ne-I', lower: { name: '2p4' }, upper: { name: '3s2' } },
]

const FRAUNHOFER: readonly TradeName[] = [
  { title: 'helium D3 line', names: ['D3', 'D3 line', 'He D3', 'He I D3', 'helium D3'], species: 'He-I', lower: end('1s.2p', '3P*0', '3P*1', '3P*2'), upper: end('1s.3d', '3D1', '3D2', '3D3') },
  { title: 'helium 1083 nm triplet', names: ['He 1083', 'He I 1083', 'helium 1083', 'He 10830', 'He I 10830', 'helium 10830'], species: 'He-I', lower: end('1s.2s', '3S1'), upper: end('1s.2p', '3P*0', '3P*1', '3P*2') },
  { title: 'magnesium b1 line', names: ['b1', 'Mg b1', 'Mg I b1', 'magnesium b1'], species: 'Mg-I', lower: end('3s.3p', '3P*2'), upper: end('3s.4s', '3S1') },
  { title: 'magnesium b2 line', names: ['b2', 'Mg b2', 'Mg I b2', 'magnesium b2'], species: 'Mg-I', lower: end('3s.3p', '3P*1'), upper: end('3s.4s', '3S1') },
  { title: 'magnesium b4 line', names: ['b4', 'Mg b4', 'Mg I b4', 'magnesium b4'], species: 'Mg-I', lower: end('3s.3p', '3P*0'), upper: end('3s.4s', '3S1') },
  { title: 'magnesium b lines', names: ['Mg b', 'Mg I b', 'magnesium b', 'Mg b lines', 'Mg I b lines', 'the Mg b lines', 'Mg b triplet', 'magnesium b lines', 'magnesium green triplet'], species: 'Mg-I', lower: end('3s.3p', '3P*0', '3P*1', '3P*2'), upper: end('3s.4s', '3S1') },
  { title: 'ionised magnesium h line', names: ['Mg h', 'Mg II h', 'magnesium h'], species: 'Mg-II', lower: end('3s'), upper: end('3p', '2P*1/2') },
  { title: 'ionised magnesium k line', names: ['Mg k', 'Mg II k', 'magnesium k'], species: 'Mg-II', lower: end('3s'), upper: end('3p', '2P*3/2') },
  { title: 'ionised magnesium h and k lines', names: ['Mg h and k', 'Mg II h and k', 'Mg h&k', 'Mg II h&k', 'Mg II hk'], species: 'Mg-II', lower: end('3s'), upper: end('3p') },
  { title: 'ionised calcium H line', names: ['Ca H', 'Ca II H', 'calcium H', 'H line', 'Fraunhofer H', 'Ca H line', 'Ca II H line'], species: 'Ca-II', lower: end('4s'), upper: end('4p', '2P*1/2') },
  { title: 'ionised calcium K line', names: ['Ca K', 'Ca II K', 'calcium K', 'K line', 'Fraunhofer K', 'Ca K line', 'Ca II K line'], species: 'Ca-II', lower: end('4s'), upper: end('4p', '2P*3/2') },
  { title: 'ionised calcium H and K lines', names: ['H and K', 'H and K lines', 'Ca H and K', 'Ca II H and K', 'Ca H&K', 'Ca II H&K', 'H&K', 'Ca II HK'], species: 'Ca-II', lower: end('4s'), upper: end('4p') },
  { title: 'ionised calcium infrared triplet', names: ['infrared triplet', 'IR triplet', 'calcium infrared triplet', 'calcium triplet', 'Ca infrared triplet', 'Ca II infrared triplet', 'Ca IR triplet', 'Ca II IR triplet', 'Ca triplet', 'Ca II triplet'], species: 'Ca-II', lower: end('3d'), upper: end('4p') },
  { title: 'calcium resonance line, Fraunhofer g', names: ['Ca g', 'Ca I g', 'Fraunhofer g', 'calcium resonance line', 'Ca I resonance line'], species: 'Ca-I', lower: end('4s2'), upper: end('4s.4p', '1P*1') },
  { title: 'oxygen 777 nm triplet', names: ['O 777', 'O I 777', 'oxygen triplet', 'oxygen infrared triplet', 'O I triplet'], species: 'O-I', lower: { terms: ['5S*2'] }, upper: { terms: ['5P1', '5P2', '5P3'] } },
]

export const TRADE_NAMES: readonly TradeName[] = [...D_LINES, ...HYDROGEN, ...LAMPS, ...FRAUNHOFER]
