import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  checkConfiguration,
  checkLevelOfConfiguration,
  type Configuration,
  electronCount,
  fillCore,
  highestSpin,
  openShells,
  parityOf,
  parseConfiguration,
  parseConfigurationOf,
  printConfiguration,
} from '@/lib/atomic/configuration'
import { tooManyOpenShells } from '@/lib/atomic/microstates'
import { capacity } from '@/lib/atomic/shells'

function read(text: string): Configuration {
  const answer = parseConfiguration(text)
  if (!answer.ok) throw new Error(answer.detail)
  return answer.value
}

describe('reading configurations', () => {
  it.each([
    ['2s22p2', '2s2.2p2'],
    ['2s2 2p2', '2s2.2p2'],
    ['2s².2p²', '2s2.2p2'],
    ['2s²2p²', '2s2.2p2'],
    ['3d^64s^2', '3d6.4s2'],
    ['3d6(5D)4s4p(3P)', '3d6.(5D).4s.4p.(3P*)'],
    ['3d6.(5D).4s.4p.(3P*)', '3d6.(5D).4s.4p.(3P*)'],
    ['3d⁶(⁵D)4s4p(³P°)', '3d6.(5D).4s.4p.(3P*)'],
    ['3d6(5D)4s(6D)5s', '3d6.(5D).4s.(6D).5s'],
    ['3d5 4s(7S)5s', '3d5.4s.(7S).5s'],
    ['3p5(2P3/2)4s', '3p5.(2P*3/2).4s'],
    ['2p3(4S)3s', '2p3.(4S*).3s'],
    ['3d6(5D)4p2(3P)', '3d6.(5D).4p2.(3P)'],
    ['3d7(a2D)4s', '3d7.(a2D).4s'],
    ['3d⁷(a²D)4s', '3d7.(a2D).4s'],
    ['[Xe].4f14.5d10', '[Xe].4f14.5d10'],
    ['[Ar]3d104s2', '[Ar].3d10.4s2'],
    ['3d104s2', '3d10.4s2'],
    ['4s14s', '4s.14s'],
    ['3p611s', '3p6.11s'],
    ['1s100p', '1s.100p'],
    ['5p66s', '5p6.6s'],
    ['4f146s2', '4f14.6s2'],
    ['1s22p', '1s2.2p'],
  ])('%s is %s', (text, canonical) => expect(printConfiguration(read(text))).toBe(canonical))

  it('the number of electrons chooses between readings', () => {
    const helium = parseConfigurationOf('1s22p', { core: null, z: 2, charge: 0 })
    expect(helium.ok && printConfiguration(helium.value)).toBe('1s.22p')
    const lithium = parseConfigurationOf('1s22p', { core: null, z: 3, charge: 0 })
    expect(lithium.ok && printConfiguration(lithium.value)).toBe('1s2.2p')
  })

  it.each([
    ['3p7', 'configuration_impossible', 'at most 6 electrons'],
    ['2d', 'configuration_impossible', 'd begins at n = 3'],
    ['0s', 'configuration_impossible', 'n runs from 1'],
    ['3s3s', 'configuration_impossible', '3s twice'],
    ['3d6(1P)4s', 'configuration_impossible', '(1P)'],
    ['3d6.(5D*).4s', 'configuration_impossible', 'marked odd'],
    ['3d6(5D7)4s', 'configuration_impossible', 'J = 0, 1 ... 4'],
    ['abc', 'configuration_malformed', 'n must stand before'],
    ['3d6(5D', 'configuration_malformed', 'do not match'],
    ['3d6)5D(', 'configuration_malformed', 'do not match'],
    ['3j2', 'configuration_malformed', 's p d f g h i'],
    ['3D6', 'configuration_malformed', 'lower case'],
    ['(5D)4s', 'configuration_malformed', 'begins with a parent'],
    ['[Q]3d', 'configuration_malformed', 'He, Ne, Ar, Kr, Xe, Rn'],
    ['3d6(2[3/2])4s', 'configuration_malformed', 'brackets'],
    ['', 'configuration_malformed', 'missing'],
    ['3', 'configuration_malformed', 'letter must follow'],
    ['1s2'.repeat(80), 'configuration_malformed', 'too long'],
    ['4f7.5f7.6f7.7f7(1S)6s', 'configuration_malformed', 'more open shells than any known level'],
  ])('%j is refused as %s and says what to mend', (text, code, says) => {
    const answer = parseConfiguration(text)
    expect(answer).toMatchObject({ ok: false, code })
    if (!answer.ok) expect(answer.detail).toContain(says)
  })

  const configurations = fc
    .uniqueArray(fc.record({ n: fc.integer({ min: 1, max: 12 }), l: fc.integer({ min: 0, max: 4 }), fill: fc.nat() }), { minLength: 1, maxLength: 5, selector: ({ n, l }) => `${n},${l}` })
    .map((shells): Configuration => ({ core: null, parts: shells.filter(({ n, l }) => n > l).map(({ n, l, fill }) => ({ kind: 'shell' as const, n, l, count: 1 + (fill % capacity(l)) })) }))
    .filter((configuration) => configuration.parts.length > 0 && tooManyOpenShells(configuration.parts) === null)

  it('canonical and unicode forms read back', () => {
    fc.assert(
      fc.property(configurations, (configuration) => {
        expect(parseConfiguration(printConfiguration(configuration))).toEqual({ ok: true, value: configuration })
        expect(parseConfiguration(printConfiguration(configuration).replaceAll('.', ' '))).toEqual({ ok: true, value: configuration })
      }),
    )
  })

  it('run together, the true reading is among those that the number of electrons leaves', () => {
    fc.assert(
      fc.property(configurations, (configuration) => {
        const run = printConfiguration(configuration).replaceAll('.', '')
        const wanted = printConfiguration(configuration)
        const answer = parseConfiguration(run, { fits: (reading) => printConfiguration(reading) === wanted })
        expect(answer.ok && printConfiguration(answer.value)).toBe(wanted)
      }),
    )
  })

  it('never throws on any text', () => {
    fc.assert(
      fc.property(fc.oneof(fc.string(), fc.string({ unit: fc.constantFrom(...'1234567spdf(). 5D[]^²') , maxLength: 60 })), (text) => {
        const answer = parseConfiguration(text)
        expect(answer.ok || answer.detail.length > 10).toBe(true)
      }),
      { numRuns: 300 },
    )
  })
})

describe('what a configuration says', () => {
  it('counts electrons, parity, open shells, largest spin', () => {
    expect(electronCount(read('[Xe].4f14.5d10'))).toBe(78)
    expect(electronCount(read('[Rn]'))).toBe(86)
    expect([parityOf(read('2s2.2p2')), parityOf(read('3d6.4s.4p'))]).toEqual(['even', 'odd'])
    expect(openShells(read('3d10.4s.4p5'))).toEqual([{ kind: 'shell', n: 4, l: 0, count: 1 }, { kind: 'shell', n: 4, l: 1, count: 5 }])
    expect([highestSpin(read('3d6.4s2')), highestSpin(read('3d5.4s.4p')), highestSpin(read('2p6'))]).toEqual([4, 7, 0])
  })

  it('fills the core, and a shell of the level replaces that of the core', () => {
    expect(printConfiguration(fillCore(read('[Xe].4f14.5d10'), read('6s.6p')))).toBe('[Xe].4f14.5d10.6s.6p')
    expect(printConfiguration(fillCore(read('[Xe].4f14.5d10'), read('5d9.6s2.6p')))).toBe('[Xe].4f14.5d9.6s2.6p')
    expect(printConfiguration(fillCore(read('[He]'), read('2s.2p2')))).toBe('[He].2s.2p2')
    expect(printConfiguration(fillCore(read('[Ne]'), read('2p5.3s2')))).toBe('1s2.2s2.2p5.3s2')
    expect(printConfiguration(fillCore(null, read('1s.2p')))).toBe('1s.2p')
  })

  it('finds a wrong number of electrons, J, parity and term, all at once', () => {
    expect(checkConfiguration(read('3s2'), { core: read('[Ne]'), z: 11, charge: 0 })).toMatchObject([{ code: 'electron_count' }])
    expect(checkConfiguration(read('3s'), { core: read('[Ne]'), z: 11, charge: 0 })).toEqual([])
    const problems = checkLevelOfConfiguration(read('2s2'), { electrons: 4, twoJ: 3, parity: 'odd', twoS: 2, l: 1 })
    expect(problems.map((problem) => problem.code)).toEqual(['j_not_half_integer', 'parity_mismatch', 'term_not_allowed'])
  })
})
