import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { electronCount, parseConfiguration } from '@/lib/atomic/configuration'
import { ELEMENTS, elementBySymbol, fromRoman, NOBLE_GAS_CORES, parseSpecies, toRoman } from '@/lib/atomic/elements'

describe('elements', () => {
  it('has 118, each symbol and name once', () => {
    expect(ELEMENTS).toHaveLength(118)
    expect(new Set(ELEMENTS.map((element) => element.symbol)).size).toBe(118)
    expect(new Set(ELEMENTS.map((element) => element.name)).size).toBe(118)
    expect([elementBySymbol('Fe')?.z, elementBySymbol('Hg')?.z, elementBySymbol('Xe')?.z, elementBySymbol('Og')?.z]).toEqual([26, 80, 54, 118])
  })

  it('each noble-gas core holds as many electrons as its gas', () => {
    for (const [symbol, core] of Object.entries(NOBLE_GAS_CORES)) {
      const configuration = parseConfiguration(core)
      expect(configuration.ok && electronCount(configuration.value), symbol).toBe(elementBySymbol(symbol)?.z)
    }
  })
})

describe('parseSpecies', () => {
  it.each([
    ['Na-I', 'Na-I'], ['Na I', 'Na-I'], ['NaI', 'Na-I'], ['na i', 'Na-I'], ['na-i', 'Na-I'], ['nai', 'Na-I'], ['sodium', 'Na-I'], ['Sodium', 'Na-I'], ['Na', 'Na-I'],
    ['Fe+', 'Fe-II'], ['Fe2+', 'Fe-III'], ['Fe²⁺', 'Fe-III'], ['Fe++', 'Fe-III'], ['Fe +2', 'Fe-III'], ['iron II', 'Fe-II'], ['FeII', 'Fe-II'],
    ['NI', 'N-I'], ['Ni', 'Ni-I'], ['ni', 'Ni-I'], ['SI', 'S-I'], ['Si', 'Si-I'], ['SiI', 'Si-I'], ['CI', 'C-I'], ['hi', 'H-I'],
    ['cesium', 'Cs-I'], ['caesium', 'Cs-I'], ['aluminum', 'Al-I'], ['He II', 'He-II'], ['U XCII', 'U-XCII'],
  ])('%s is %s', (text, id) => expect(parseSpecies(text)).toMatchObject({ ok: true, value: { id } }))

  it.each([
    ['H-II', 'species_impossible', 'no electron left'],
    ['Na-XII', 'species_impossible', 'stages I to XI'],
    ['Xx-I', 'element_unknown', 'symbol or English name'],
    ['Na-IIII', 'stage_malformed', 'Roman numerals'],
    ['Na 1', 'stage_malformed', 'Na I is neutral'],
    ['', 'species_malformed', 'Na-I'],
    ['Na-I.3', 'species_malformed', 'Na-I'],
    ['N\u0000a', 'species_malformed', 'Na-I'],
  ])('%j is refused as %s', (text, code, says) => {
    const answer = parseSpecies(text)
    expect(answer).toMatchObject({ ok: false, code })
    if (!answer.ok) expect(answer.detail).toContain(says)
  })

  it('every stage of every element round-trips by id and by name', () => {
    for (const element of ELEMENTS) {
      for (let stage = 1; stage <= element.z; stage += 1) {
        const answer = parseSpecies(`${element.symbol}-${toRoman(stage)}`)
        expect(answer).toMatchObject({ ok: true, value: { z: element.z, stage, charge: stage - 1 } })
        expect(answer.ok && parseSpecies(answer.value.name)).toEqual(answer)
      }
    }
  })

  it('Roman numerals read back; improper ones do not', () => {
    for (let stage = 1; stage <= 118; stage += 1) expect(fromRoman(toRoman(stage))).toBe(stage)
    for (const text of ['IIII', 'VX', 'IC', '', 'A', 'VV']) expect(fromRoman(text)).toBeNull()
  })

  it('never throws', () => {
    fc.assert(fc.property(fc.string({ unit: 'binary' }), (text) => {
      const answer = parseSpecies(text)
      expect(answer.ok || answer.detail.length > 10).toBe(true)
    }))
  })
})
