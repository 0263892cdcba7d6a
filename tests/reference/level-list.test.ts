import { describe, expect, it } from 'vitest'
import { checkConfiguration, checkLevelOfConfiguration, type Configuration, parseConfiguration, parseConfigurationOf, printConfiguration } from '@/lib/atomic/configuration'
import { highestSpin } from '@/lib/atomic/configuration'
import { parseSpecies } from '@/lib/atomic/elements'
import { formatHalf } from '@/lib/atomic/half'
import { gBounds } from '@/lib/atomic/lande'
import { termAllowed } from '@/lib/atomic/microstates'
import { printTerm } from '@/lib/atomic/term'
import { CORES, gOf, listed, termOf, two } from './levels'

/** The configuration as the table keeps it: Ar II's ground pair is listed with its 3s2 written out, which its core holds. */
const written = (species: string, configuration: string): string => (species === 'Ar II' && configuration === '3s2 3p5' ? '3p5' : configuration)

function read(text: string): Configuration {
  const configuration = parseConfiguration(text)
  if (!configuration.ok) throw new Error(configuration.detail)
  return configuration.value
}

const coreOf = (species: string): Configuration | null => {
  const core = CORES[species]
  return core ? read(core) : null
}

describe('every listed level passes the checks of its configuration', () => {
  it('is the whole list', () => {
    expect(listed).toHaveLength(33)
    expect(listed.reduce((sum, row) => sum + row.levels.length, 0)).toBe(407)
  })

  it.each(listed)('$species', ({ species, Z, charge, levels }) => {
    const name = parseSpecies(species)
    expect(name).toMatchObject({ ok: true, value: { z: Z, charge, name: species } })
    const core = coreOf(species)
    for (const level of levels) {
      const about = `${species} ${level.configuration} ${level.term} ${level.J}`
      const configuration = parseConfigurationOf(written(species, level.configuration), { core, z: Z, charge })
      expect(configuration.ok, about).toBe(true)
      if (!configuration.ok) continue
      expect(checkConfiguration(configuration.value, { core, z: Z, charge }), about).toEqual([])
      const twoS = level.S === null ? null : two(level.S)
      const problems = checkLevelOfConfiguration(configuration.value, { electrons: Z - charge, twoJ: two(level.J), parity: level.parity, twoS, l: level.L })
      expect(problems, about).toEqual([])
      const canonical = printConfiguration(configuration.value)
      expect(printConfiguration(read(canonical)), about).toBe(canonical)
      const term = termOf(level)
      expect(printTerm({ ...term, parity: level.parity, twoJ: two(level.J) }, 'ascii')).toBe(
        `${level.term.replace(/^[a-z] /, '')}${level.parity === 'odd' ? '*' : ''}${formatHalf(two(level.J))}`,
      )
      const bounds = gBounds({ twoSMax: highestSpin(configuration.value), twoJ: two(level.J) })
      const { g } = gOf(level)
      if (g === null) expect(level.J, about).toBe('0')
      else {
        expect(g, about).toBeGreaterThan(bounds?.lower ?? Number.NaN)
        expect(g, about).toBeLessThan(bounds?.upper ?? Number.NaN)
      }
    }
  })

  it('canonical forms carry the parents and their parity', () => {
    expect(printConfiguration(read('3d6(5D)4s4p(3P)'))).toBe('3d6.(5D).4s.4p.(3P*)')
    expect(printConfiguration(read('3d5(6S)4s4p(1P)'))).toBe('3d5.(6S).4s.4p.(1P*)')
    expect(printConfiguration(read('3d6(5D)4s(6D)5p'))).toBe('3d6.(5D).4s.(6D).5p')
    expect(printConfiguration(read('3d5 4s(7S)5s'))).toBe('3d5.4s.(7S).5s')
    expect(printConfiguration(read('2p5(2P1/2)3p'))).toBe('2p5.(2P*1/2).3p')
    expect(printConfiguration(read('2p3(4S)3s'))).toBe('2p3.(4S*).3s')
    expect(printConfiguration(read('5p4(3P2)6s'))).toBe('5p4.(3P2).6s')
  })

  it.each([
    ['2s2', 2, 1, 'a closed shell makes 1S alone'],
    ['2p2', 0, 1, 'two equivalent p electrons make 1S, 3P, 1D'],
    ['2p2', 2, 2, 'the same'],
    ['3d6.4s2', 6, 2, 'six d electrons have at most four unpaired'],
    ['3d6.(5D).4s', 3, 3, '5D and 2S make D only'],
    ['4p6', 0, 2, 'a closed shell'],
  ])('%s cannot make 2S = %i, L = %i: %s', (text, twoS, l) => {
    expect(termAllowed(read(text), twoS, l)).toBe(false)
  })
})
