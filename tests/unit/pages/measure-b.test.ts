import { describe, expect, it } from 'vitest'
import { isBlock, readBlock, readTyped, tidyNumber } from '@/app/(bench)/_measure/pasted'
import { fitBody, isTransition, type Measured, readRows, writeRows } from '@/app/(bench)/_measure/state'

describe('numbers as they are typed', () => {
  it.each([
    ['589,1234', '589.1234'],
    [' 16 972.735 ', '16972.735'],
    ['16\u2009972,735', '16972.735'],
    ['\u22120.5', '-0.5'],
    ['+3', '3'],
    ['1,234,567.5', '1234567.5'],
    ['16972.', '16972.'],
    ['abc', 'abc'],
  ])('%s becomes %s', (text, tidy) => expect(tidyNumber(text)).toBe(tidy))

  it.each([['16972.5', 16972.5], ['.5', 0.5], ['1e-3', 0.001], ['-', null], ['', null], ['1e999', null], ['0x10', null], ['Infinity', null]])('%s means %s', (text, value) => expect(readTyped(text)).toBe(value))
})

describe('a pasted block', () => {
  it('holds positions and uncertainties by column, heads left out', () => {
    expect(readBlock('nm\tsigma\r\n589,1234\t0,0003\r\n\r\n589,1300\t0,0004')).toEqual({ rows: [{ value: '589.1234', unc: '0.0003' }, { value: '589.1300', unc: '0.0004' }], leftOut: 1 })
  })

  it.each([
    ['589.1234(5)', { value: '589.1234', unc: '0.0005' }],
    ['589.12(13)', { value: '589.12', unc: '0.13' }],
    ['589.1234 ± 0.0005', { value: '589.1234', unc: '0.0005' }],
    ['589.1234 0.0005', { value: '589.1234', unc: '0.0005' }],
    ['589,1234;0,0005', { value: '589.1234', unc: '0.0005' }],
    ['16 972,735', { value: '16972.735', unc: '' }],
  ])('%s', (text, row) => expect(readBlock(text).rows).toEqual([row]))

  it('is told from one number', () => {
    expect(['1\n2', '1\t2', '589.1 0.1'].map(isBlock)).toEqual([true, true, true])
    expect(['589.1', '16 972.7', '589,1234'].map(isBlock)).toEqual([false, false, false])
  })
})

describe('the address of a measurement', () => {
  const rows = [{ value: '16972.7', unc: '0.006', assigned: 'c1.-1', line: 0 }, { value: '16973.4', unc: '', assigned: '', line: 1 }, { value: '', unc: '', assigned: '', line: 0 }]

  it('keeps every row but empty ones at the end', () => {
    expect(writeRows(rows)).toBe('16972.7,0.006,c1.-1;16973.4,,,1')
    expect(readRows(writeRows(rows))).toEqual(rows.slice(0, 2))
    expect([writeRows([]), readRows('')]).toEqual(['', []])
  })

  it('takes nothing that no row can be', () => {
    expect(readRows('1,2,drop table,-3;x')).toEqual([{ value: '1', unc: '2', assigned: '', line: 0 }, { value: 'x', unc: '', assigned: '', line: 0 }])
    expect(readRows(Array.from({ length: 1000 }, () => '1').join(';'))).toHaveLength(300)
    expect(['Na-I.1~Na-I.3', 'na-i.1~x', '../..', 'Fe-II.12~Fe-II.3'].map(isTransition)).toEqual([true, false, false, true])
  })

  const measured: Measured = {
    lines: ['Na-I.1~Na-I.3', 'Na-I.1~Na-I.2'], rows, quantity: 'positions', unit: 'nm', medium: 'vacuum', shared: true, scale: 'uncertain', scaleUnc: '0.01', model: 'linear', thetaDeg: 0, range: '', step: '', stepUnc: '', unknown: 'field', field: '', fieldUnc: '', freeG: 'upper', edition: 2,
  }

  it('is the request that it stands for', () => {
    expect(fitBody(measured)).toEqual({
      places: [0, 1],
      unread: [],
      body: {
        edition: 2, mode: 'positions', quantity: 'positions', unit: 'nm', medium: 'vacuum', scale: { unc: 0.01 }, model: 'linear', theta_deg: 0,
        lines: [{ transition: 'Na-I.1~Na-I.3', zero: 'shared' }, { transition: 'Na-I.1~Na-I.2', zero: 'shared' }],
        measurements: [{ position: 16972.7, position_unc: 0.006, m_lower: 0.5, m_upper: -0.5 }, { line: 1, position: 16973.4 }],
      },
    })
  })

  it('asks nothing while there is nothing to ask, and leaves out what is no number yet', () => {
    expect(fitBody({ ...measured, lines: [] }).body).toBeNull()
    expect(fitBody({ ...measured, rows: [] }).body).toBeNull()
    expect(fitBody({ ...measured, quantity: 'ring_radii' }).body).toBeNull()
    expect(fitBody({ ...measured, unknown: 'g' }).body).toBeNull()
    expect(fitBody({ ...measured, rows: [{ value: '16e', unc: '', assigned: '', line: 0 }, ...rows] })).toMatchObject({ unread: [0], places: [1, 2] })
  })

  it.each([['qs', { q: 'sigma' }], ['q-1', { q: -1 }], ['g1', { group: 1 }], ['c-3.-1', { m_lower: -1.5, m_upper: -0.5 }], ['', {}]])('assignment %s', (assigned, members) => {
    expect(fitBody({ ...measured, rows: [{ value: '1', unc: '', assigned, line: 0 }] }).body?.measurements).toEqual([{ position: 1, ...members }])
  })

  it('rings and g are asked with what belongs to them', () => {
    expect(fitBody({ ...measured, quantity: 'ring_radii', range: '1', step: '10', stepUnc: '0.1' }).body).toMatchObject({ etalon: { free_spectral_range_invcm: 1, square_step: 10, square_step_unc: 0.1 }, lines: [{ transition: 'Na-I.1~Na-I.3' }, { transition: 'Na-I.1~Na-I.2' }] })
    expect(fitBody({ ...measured, unknown: 'g', field: '0.8T', fieldUnc: '1mT', freeG: 'both' }).body).toMatchObject({ unknown: 'g', field: '0.8T', field_unc: '1mT', free_g: 'both' })
  })
})
