import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { effectiveG } from '@/lib/atomic/moments'
import { criteriaOfQuery, find, understand } from '@/lib/catalogue/find'
import { linesOfName } from '@/lib/catalogue/find/read-names'
import { TRADE_NAMES } from '@/lib/catalogue/find/trade-names'
import { listLevels } from '@/lib/catalogue/levels'
import { lineId } from '@/lib/catalogue/lines'
import { Find } from '@/openapi/schemas/find'
import { syntheticSnapshot } from '@/tests/bench/synthetic'
import { seedSnapshot, withRetired } from './editions'

const snapshot = seedSnapshot()
const ask = (q: string) => find(snapshot, q, { levels: 200, lines: 200 })
const kinds = (q: string) => ask(q).understood.map(({ kind, text }) => `${kind}: ${text}`)
const levels = (q: string) => ask(q).levels.map((i) => snapshot.levelId(i))
const lines = (q: string) => ask(q).lines.map(({ lower, upper }) => lineId(snapshot, lower, upper))
const species = (q: string) => [...new Set(levels(q).map((id) => id.split('.')[0]))]

describe('ions', () => {
  it.each(['Na I', 'Na-I', 'NaI', 'na i', 'sodium', 'Sodium', 'Na', 'na', 'nai', 'sodium I', 'natrium'])('%s is neutral sodium', (q) => {
    expect(species(q)).toEqual(['Na-I'])
    expect(ask(q).levelsTotal).toBe(11)
    expect(ask(q).understood).toHaveLength(1)
    expect(ask(q).understood[0]?.kind).toBe('species')
  })

  it('an element alone is all its stages', () => {
    expect(species('Ar')).toEqual(['Ar-I', 'Ar-II'])
    expect(species('calcium')).toEqual(['Ca-I', 'Ca-II'])
    expect(species('ca ii')).toEqual(['Ca-II'])
    expect(species('Ca+')).toEqual(['Ca-II'])
  })

  it('two species are both', () => {
    expect(species('Na I K I')).toEqual(['Na-I', 'K-I'])
  })

  it.each(['gold', 'Fe II', 'Na XI'])('%s is understood, and said not to be here', (q) => {
    const { understood, levelsTotal, linesTotal } = ask(q)
    expect(understood[0]).toMatchObject({ kind: 'species', meaning: expect.stringContaining('not in this edition') as string })
    expect([levelsTotal, linesTotal]).toEqual([0, 0])
  })

  it('an ion that cannot be is said to be impossible', () => {
    expect(ask('H II').understood[0]?.meaning).toContain('no electron left')
  })

  it('silicon is not sulphur I', () => {
    expect(species('si')).toEqual(['Si-I'])
    expect(species('Si I')).toEqual(['Si-I'])
  })
})

describe('terms, configurations, J, parity', () => {
  it.each(['Na I 3p 2P*3/2', 'Na I 3p ²P°₃/₂', 'sodium 3p 2Po3/2', '2P* 3/2 3p Na', 'Na-I 3p 2P*3-2', 'Na 3p j=3/2', 'Na 3p J 3/2', 'Na 3p 3/2', 'Na-I.3'])('%s is one level', (q) => {
    expect(levels(q)).toEqual(['Na-I.3'])
  })

  it('reads labels before terms, run on or apart', () => {
    expect(levels('Fe z5P*2')).toEqual(['Fe-I.23'])
    expect(levels('Fe z 5P*2')).toEqual(['Fe-I.23'])
    expect(levels('Fe z 5P* 2')).toEqual(['Fe-I.23'])
  })

  it('reads configurations however they are written', () => {
    for (const q of ['Fe 3d6(5D)4s4p(3P)', 'Fe 3d6.(5D).4s.4p.(3P*)', 'Fe I 3d6 (5D) 4s 4p (3P)', 'iron 4s4p']) expect(ask(q).levelsTotal).toBe(10)
    expect(levels('C II 2s22p')).toEqual(['C-II.1', 'C-II.2'])
    expect(levels('He 1s2p').length).toBe(4)
  })

  it('takes two configurations with a dash between as the two ends of lines', () => {
    expect(lines('Na I 3s – 3p').sort()).toEqual(['Na-I.1~Na-I.2', 'Na-I.1~Na-I.3'])
    expect(lines('Na 3s -> 3p').sort()).toEqual(['Na-I.1~Na-I.2', 'Na-I.1~Na-I.3'])
  })

  it('shows the configuration asked for before those that contain it', () => {
    const found = ask('3p')
    const exact = found.levels.map((i) => snapshot.configurationOf(i) === '3p')
    expect(exact[0]).toBe(true)
    expect(exact.lastIndexOf(true)).toBeLessThan(exact.indexOf(false))
  })

  it('pair-coupling symbols too', () => {
    expect(levels('Ne 2[3/2]*2')).toEqual(['Ne-I.2'])
  })

  it('what cannot be is said to be impossible, with the rule', () => {
    expect(ask('2P*5/2').understood[0]?.meaning).toMatch(/not possible: .*J = 1\/2 or 3\/2/)
    expect(ask('3p7').understood[0]?.meaning).toMatch(/not possible: .*at most 6/)
    expect(ask('2P*5/2').levelsTotal).toBe(0)
  })

  it('parity in a word', () => {
    expect(levels('Na odd parity')).toEqual(['Na-I.2', 'Na-I.3', 'Na-I.7', 'Na-I.8'])
  })
})

describe('places in the spectrum', () => {
  it.each(['589.0±0.2 nm', '588.8-589.2 nm', '588.8 – 589.2 nm', '588.8..589.2nm', '588.8 to 589.2 nm', 'between 588.8 and 589.2 nm', '5890.0 ± 2 Å', '589.0 +/- 0.2 nm', '0.5888-0.5892 µm'])('%s holds D2', (q) => {
    expect(lines(q)).toEqual(['Na-I.1~Na-I.3'])
    expect(kinds(q)).toEqual([`wavelength: ${q}`])
  })

  it('the digits say how near: 589 is 588 to 590, 588.995 one thousandth', () => {
    expect(ask('589 nm').understood[0]?.meaning).toBe('lines from 588 to 590 nm in air')
    expect(lines('588.995 nm')).toEqual(['Na-I.1~Na-I.3'])
    expect(ask('1 µm').understood[0]?.meaning).toBe('lines from 0.98 to 1.02 µm in air')
  })

  it('puts the line nearest to the place asked for first', () => {
    expect(lines('Na 589 nm')[0]).toBe('Na-I.1~Na-I.3')
    expect(lines('Na 589.6±1 nm')[0]).toBe('Na-I.1~Na-I.2')
  })

  it('air or vacuum can be said', () => {
    expect(lines('589.158 nm vacuum')).toEqual(['Na-I.1~Na-I.3'])
    expect(lines('589.158 nm in air')).toEqual([])
    expect(ask('121.567 nm').understood[0]?.meaning).toContain('in vacuum')
  })

  it('shows the levels that make the lines', () => {
    expect(levels('Fe I 6302.5 Å')).toEqual(['Fe-I.24', 'Fe-I.30'])
    expect(lines('Fe I 630 nm')).toEqual(['Fe-I.23~Fe-I.29', 'Fe-I.24~Fe-I.30'])
  })

  it.each(['16973 cm-1', '16973 cm^-1', '16973 cm⁻¹', '16973 invcm', '508.84±0.02 THz', '2.10440±0.00005 eV'])('%s is an energy: levels there and lines of it', (q) => {
    expect(levels(q)).toEqual(['Na-I.3'])
    expect(lines(q)).toEqual(['Na-I.1~Na-I.3'])
    expect(ask(q).understood[0]?.kind).toBe('energy')
  })

  it.each(['6302.5', 'Fe 6302', 'Na 589'])('%s is asked about, not guessed', (q) => {
    const { questions, understood } = ask(q)
    expect(questions).toHaveLength(1)
    expect(questions[0]?.options.length).toBeGreaterThan(1)
    expect(understood.some(({ kind }) => kind === 'wavelength' || kind === 'energy')).toBe(false)
    for (const option of questions[0]?.options ?? []) {
      expect(understand(snapshot, option.q).questions).toEqual([])
      expect(understand(snapshot, option.q).understood.at(-1)?.kind).not.toBe('text')
    }
  })

  it('a bare number alone finds nothing until it is said what it is', () => {
    expect(ask('6302.5')).toMatchObject({ levelsTotal: 0, linesTotal: 0 })
    expect(ask(ask('6302.5').questions[0]?.options[0]?.q ?? '').linesTotal).toBeGreaterThan(0)
  })
})

describe('Landé factors', () => {
  it('g>2 leaves out 2 itself and levels without g', () => {
    const found = ask('g>2')
    expect(found.levelsTotal).toBeGreaterThan(0)
    for (const i of found.levels) expect(snapshot.level(i).g_j.adopted).toBeGreaterThan(2)
  })

  it.each(['geff>2.5', 'g_eff > 2.5', 'g eff>2.5'])('%s bounds the effective factor of lines', (q) => {
    const found = ask(q)
    expect(found.linesTotal).toBeGreaterThan(0)
    for (const { lower, upper } of found.lines) {
      const [a, b] = [snapshot.level(lower), snapshot.level(upper)]
      expect(effectiveG({ twoJ: 2 * a.term.j, g: a.g_j.adopted }, { twoJ: 2 * b.term.j, g: b.g_j.adopted })).toBeGreaterThan(2.5)
    }
  })

  it('g_eff=3 is near 3', () => {
    expect(lines('Fe g_eff=3')).toContain('Fe-I.5~Fe-I.17')
  })
})

describe('names of the trade', () => {
  it.each([
    ['D1', ['Na-I.1~Na-I.2']],
    ['sodium D1', ['Na-I.1~Na-I.2']],
    ['Na D2 line', ['Na-I.1~Na-I.3']],
    ['sodium D lines', ['Na-I.1~Na-I.2', 'Na-I.1~Na-I.3']],
    ['K D1', ['K-I.1~K-I.2']],
    ['D1 of potassium', ['K-I.1~K-I.2']],
    ['Rb I D2', ['Rb-I.1~Rb-I.3']],
    ['Mg b1', ['Mg-I.4~Mg-I.6']],
    ['b2', ['Mg-I.3~Mg-I.6']],
    ['Mg b4', ['Mg-I.2~Mg-I.6']],
    ['Ca H', ['Ca-II.1~Ca-II.4']],
    ['Ca II K', ['Ca-II.1~Ca-II.5']],
    ['green mercury line', ['Hg-I.4~Hg-I.6']],
    ['Hg blue', ['Hg-I.3~Hg-I.6']],
    ['He-Ne laser', ['Ne-I.12~Ne-I.16']],
    ['Ne 1s5-2p9', ['Ne-I.2~Ne-I.7']],
    ['Na-I.3~Na-I.1', ['Na-I.1~Na-I.3']],
  ])('%s', (q, expected) => {
    expect(lines(q).sort()).toEqual(expected)
  })

  it.each([['H-alpha', 7], ['Hα', 7], ['H alpha', 7], ['Balmer alpha', 7], ['Ly-alpha', 2], ['Lyman α', 2], ['Mg b', 3], ['the Mg b lines', 3], ['infrared triplet', 3], ['Ca II IR triplet', 3], ['H and K', 2], ['He 1083', 3], ['helium 10830', 3], ['O 777', 3]] as const)('%s has %i lines', (q, count) => {
    expect(ask(q).linesTotal).toBe(count)
    expect(ask(q).understood.map(({ kind }) => kind)).toEqual(['line_name'])
    expect(ask(q).understood[0]?.meaning).toContain('common practice')
  })

  it('a name with a unit behind it is a wavelength', () => {
    expect(kinds('He 1083 nm')).toEqual(['species: He', 'wavelength: 1083 nm'])
  })

  it('every name in the table is read as itself, and stands for lines of the first edition', () => {
    // of hydrogen the edition ends with n = 4; these names are known all the same, and said to have no line here
    const absent = TRADE_NAMES.filter((row) => linesOfName(snapshot, row).length === 0).map(({ title }) => title)
    expect(absent).toEqual(['hydrogen Balmer gamma', 'hydrogen Paschen beta'])
    expect(ask('H-gamma').understood[0]?.meaning).toContain('no such line in this edition')
    for (const row of TRADE_NAMES) {
      for (const name of row.names) {
        const { understood } = ask(name)
        expect(understood.map(({ kind }) => kind), name).toEqual(['line_name'])
        expect(understood[0]?.meaning, name).toContain(row.title)
      }
    }
  })

  it('no name stands for two different lines', () => {
    const seen = new Map<string, string>()
    for (const row of TRADE_NAMES) for (const name of row.names) {
      expect(seen.get(name.toLowerCase()) ?? row.title, name).toBe(row.title)
      seen.set(name.toLowerCase(), row.title)
    }
  })
})

describe('Paschen names', () => {
  it('names a level where the shell could not be', () => {
    expect(levels('Ne 1s5')).toEqual(['Ne-I.2'])
    expect(levels('2p10')).toEqual(['Ne-I.6', 'Ar-I.6'])
  })

  it('asks where it is a shell as well, and shows both, the named level first', () => {
    const found = ask('Ne 2p5')
    expect(found.questions).toHaveLength(1)
    expect(snapshot.levelId(found.levels[0] ?? 0)).toBe('Ne-I.11')
    const [named, shells] = found.questions[0]?.options ?? []
    expect(levels(named?.q ?? '')).toEqual(['Ne-I.11'])
    expect(ask(shells?.q ?? '').levelsTotal).toBe(15)
  })

  it('without a noble gas 3s2 is a shell, and it asks', () => {
    const found = ask('3s2')
    expect(found.understood[0]?.kind).toBe('configuration')
    expect(found.questions).toHaveLength(1)
  })
})

describe('identifiers', () => {
  it('says of a retired level that it is retired', () => {
    const later = withRetired(['Na-I.3'])
    expect(understand(later, 'Na-I.3').understood[0]?.meaning).toBe('level Na-I.3: retired in edition 2, see Na-I.2')
    expect(find(later, 'Na-I.3', { levels: 5, lines: 5 }).levelsTotal).toBe(0)
  })

  it('a pair of equal energies has no line', () => {
    expect(ask('C-II.11~C-II.12')).toMatchObject({ linesTotal: 0, levelsTotal: 0 })
  })

  it('a forbidden pair asked by name is shown: the rules are told with it', () => {
    expect(lines('Na-I.1~Na-I.4')).toEqual(['Na-I.1~Na-I.4'])
  })
})

describe('words', () => {
  it('looks for other words in notes and names', () => {
    expect(levels('laser')).toContain('Ne-I.16')
  })

  it('says which words it did not understand, and lets them be taken away', () => {
    const { understood, levelsTotal } = ask('banana Na I')
    expect(understood).toEqual([
      { kind: 'text', text: 'banana', meaning: expect.stringContaining('not understood') as string, without: 'Na I' },
      { kind: 'species', text: 'Na I', meaning: 'Na I (sodium, neutral)', without: 'banana' },
    ])
    expect(levelsTotal).toBe(0)
    expect(ask(understood[0]?.without ?? '').levelsTotal).toBe(11)
  })

  it('gives GET /levels?q= the same levels as the search box', () => {
    for (const q of ['Na I 3p', 'Fe I 630 nm', 'z5P*', 'D1', 'g>2', 'odd', '6302.5', 'banana', 'Ne 1s5']) {
      const list = listLevels(snapshot, { criteria: criteriaOfQuery(snapshot, q), sort: 'species', limit: 1000, after: null, explain: false })
      expect(list?.total, q).toBe(ask(q).levelsTotal)
    }
  })
})

const pieces = fc.constantFrom('Na', 'I', 'Fe I', '3p', '2P*3/2', '589 nm', '6302.5', 'g>2', '~', '±', '°', '(', ')', '[', ']', '²', '₃/₂', 'α', 'D1', 'z', '5P', 'Å', 'cm-1', '..', '-', '/', '*', '\u0000', '\u202e', '\ud83d\ude42', '１', 'ﬁ', 'Å', '3d6(5D', 'E<', '=', 'x'.repeat(40))
const anything = fc.oneof(fc.string({ maxLength: 200, unit: 'binary' }), fc.string({ maxLength: 200 }), fc.array(pieces, { maxLength: 25 }).chain((list) => fc.constantFrom('', ' ').map((gap) => list.join(gap).slice(0, 200))))

describe('any text at all', () => {
  it('has an answer in the shape of the contract; every visible word belongs to one part, in order', () => {
    fc.assert(
      fc.property(anything, (q) => {
        const found = find(snapshot, q, { levels: 5, lines: 5 })
        const parsed = Find.pick({ understood: true, questions: true, levels_total: true, lines_total: true }).safeParse({ understood: found.understood, questions: found.questions, levels_total: found.levelsTotal, lines_total: found.linesTotal })
        expect(parsed.error).toBeUndefined()
        let at = 0
        for (const part of found.understood) {
          const start = q.indexOf(part.text, at)
          expect(start).toBeGreaterThanOrEqual(at)
          // between two parts stand only gaps and stops
          expect(q.slice(at, start)).not.toMatch(/[\p{L}\p{N}]/u)
          at = start + part.text.length
          expect(part.meaning).not.toBe('')
          expect(part.without.length).toBeLessThan(q.length + 1)
        }
        expect(q.slice(at)).not.toMatch(/[\p{L}\p{N}]/u)
        for (const i of found.levels) expect(i >= 0 && i < snapshot.size).toBe(true)
        expect(found.levels.length).toBeLessThanOrEqual(5)
        expect(found.lines.length).toBeLessThanOrEqual(5)
      }),
      { numRuns: 600 },
    )
  }, 120_000)
})

describe('on a large edition', () => {
  it('gives the same lines of a level as looking at every pair, and a lower bound where there are too many', () => {
    const large = syntheticSnapshot({ species: 4, levels: 800, seed: 21 })
    const all = find(large, 'odd', { levels: 10, lines: 10 })
    expect(all.lines).toHaveLength(10)
    expect(all.linesTotal).toBeGreaterThan(10)
    const one = find(large, large.levelId(5), { levels: 10, lines: 1000 })
    expect(one.linesTotalIsLowerBound).toBe(false)
    expect(one.linesTotal).toBe(one.lines.length)
    for (const { lower, upper } of one.lines) expect(lower === 5 || upper === 5).toBe(true)
  })
})
