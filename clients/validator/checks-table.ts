import type { Level } from '../typescript'
import { ProblemError } from '../typescript'
import { type Check, type Inquiry, NothingToCheck } from './inquiry'

const idsOf = (rows: readonly { id: string }[]): string[] => rows.map(({ id }) => id)

/** A filter, and what every row of its answer has to be. */
function filtersOf(level: Level): [Record<string, string | number>, (row: Level) => boolean][] {
  const { species, energy_invcm: energy, term, g_j: g } = level
  const filters: [Record<string, string | number>, (row: Level) => boolean][] = [
    [{ species, energy_min_invcm: energy, energy_max_invcm: energy }, (row) => row.species === species && row.energy_invcm === energy],
    [{ species, j: term.j, parity: term.parity }, (row) => row.species === species && row.term.j === term.j && row.term.parity === term.parity],
    [{ species, configuration: level.configuration }, (row) => row.species === species && row.configuration === level.configuration],
    [{ species, source: level.energy_source }, (row) => row.species === species],
  ]
  // a symbol with the mark of odd parity means odd, one without it either
  if (level.coupling === 'LS') filters.push([{ species, term: term.symbol }, (row) => row.species === species && (row.term.symbol === term.symbol || row.term.symbol.replace('*', '') === term.symbol)])
  if (g.adopted !== null) filters.push([{ species, g_min: g.adopted, g_max: g.adopted }, (row) => row.g_j.adopted === g.adopted])
  return filters
}

const filters: Check = {
  name: 'filters',
  claim: 'A filter made from a level finds that level, and nothing that is not as asked.',
  async run(the) {
    for (const level of the.levels) {
      for (const [filter, fits] of filtersOf(level)) {
        const rows = await the.rows('listLevels', filter)
        the.claim(idsOf(rows).includes(level.id), () => `${level.id} is not among the ${rows.length} rows`)
        const stray = rows.find((row) => !fits(row))
        the.claim(stray === undefined, () => `${stray?.id ?? ''} is not as asked`)
      }
    }
  },
}

const windows: Check = {
  name: 'line windows',
  claim: 'A window around a line, in any scale, finds that line and nothing outside.',
  async run(the) {
    for (const line of the.lines) {
      for (const [name, value] of [['wavenumber', line.wavenumber_invcm], ['wavelength', line.wavelength_vac_nm], ['frequency', line.frequency_thz]] as const) {
        const unit = { wavenumber: 'invcm', wavelength: 'nm', frequency: 'thz' }[name]
        const [low, high] = [value * (1 - 1e-9), value * (1 + 1e-9)]
        const rows = await the.rows('listTransitions', { [`${name}_min_${unit}`]: low, [`${name}_max_${unit}`]: high, ...(name === 'wavelength' ? { medium: 'vacuum' } : {}), species: line.lower.species, kind: line.kind, rules: 'rigorous' })
        the.claim(idsOf(rows).includes(line.id), () => `${line.id} at ${value} is not among the ${rows.length} rows`)
        const valueOf = (row: typeof line): number => ({ wavenumber: row.wavenumber_invcm, wavelength: row.wavelength_vac_nm, frequency: row.frequency_thz })[name]
        const stray = rows.find((row) => valueOf(row) < low || valueOf(row) > high)
        the.claim(stray === undefined, () => `${stray?.id ?? ''} is outside`)
      }
    }
  },
}

const paging: Check = {
  name: 'paging',
  claim: 'Pages of any size give the same rows in the same order, each once.',
  async run(the) {
    for (const species of new Set(the.levels.map((level) => level.species))) {
      const whole = idsOf(await the.rows('listLevels', { species }))
      if (whole.length < 2) continue
      const limit = Math.max(1, Math.min(1000, Math.ceil(whole.length / the.random.between(2, 6))))
      const paged = idsOf(await the.rows('listLevels', { species, limit }))
      the.claim(paged.join() === whole.join(), () => `pages of ${limit} give ${paged.length} rows, other than the ${whole.length} of one page`)
      the.claim(new Set(paged).size === paged.length, () => 'a row comes twice')
    }
  },
}

const order: Check = {
  name: 'order of a line',
  claim: 'The order of the two levels in the name of a line does not matter.',
  async run(the) {
    for (const line of the.lines) {
      const turned = line.id.split('~').reverse().join('~')
      the.note('getTransition', { transition: turned, kind: line.kind })
      const [one, other] = [await the.table.get('getTransition', { transition: line.id, kind: line.kind }), await the.table.get('getTransition', { transition: turned, kind: line.kind })]
      the.claim(other.data.id === line.id, () => `the answer is named ${other.data.id} instead of ${line.id}`)
      the.claim(JSON.stringify(one.data) === JSON.stringify(other.data), () => 'the two answers differ')
    }
  },
}

async function refusal(the: Inquiry, asked: Promise<unknown>, place: 'parameter' | 'pointer', name: string, nearest: string): Promise<void> {
  const problem = await asked.then(() => null, (error: unknown) => error)
  if (problem !== null && !(problem instanceof ProblemError)) throw problem
  the.claim(problem?.status === 400, () => `answered ${problem === null ? 'with success' : String(problem.status)} instead of 400`)
  const fault = problem?.errors.find((one) => one[place] === name)
  the.claim(fault !== undefined, () => `no fault names ${name}`)
  the.claim(fault?.detail.includes(nearest) === true, () => `the fault does not name ${nearest}: ${fault?.detail ?? ''}`)
}

const strictness: Check = {
  name: 'unknown input',
  claim: 'An unknown parameter or member of a body is refused by name, with the nearest known one; several are all told.',
  async run(the) {
    const wrong = { specie: 'Na-I' } as never
    the.note('listLevels', wrong)
    await refusal(the, the.table.get('listLevels', wrong), 'parameter', 'specie', 'species')
    the.note('listTransitions', { kindd: 'E1', wavelength_mn_nm: 1 } as never)
    const both = await the.table.get('listTransitions', { kindd: 'E1', wavelength_mn_nm: 1 } as never).then(() => null, (error: unknown) => error)
    the.claim(both instanceof ProblemError && ['kindd', 'wavelength_mn_nm'].every((name) => both.errors.some((fault) => fault.parameter === name)), () => 'not both are named')
    const judged = { lower: { energy_invcm: 0, s: 0, l: 0, j: 0, parity: 'even' }, upper: { energy_invcm: 1e4, s: 0, l: 1, j: 1, parity: 'odd' }, kin: 'E1' } as never
    the.note('judgeTransition', {}, judged)
    await refusal(the, the.table.post('judgeTransition', judged), 'pointer', '/kin', 'kind')
  },
}

const levels: Check = {
  name: 'levels',
  claim: 'J fits S and L, a level of J = 0 has no g, no energy is below zero, and what a level says of itself is what the list says.',
  async run(the) {
    for (const level of the.levels) {
      the.note('getLevel', { level: level.id })
      const { data } = await the.table.get('getLevel', { level: level.id })
      const { s, l, j, degeneracy } = data.term
      if (s !== null && l !== null) the.claim(j >= Math.abs(l - s) && j <= l + s && Number.isInteger(l + s - j), () => `J = ${j} with S = ${s}, L = ${l}`)
      the.claim(degeneracy === 2 * j + 1, () => `degeneracy ${degeneracy} with J = ${j}`)
      the.claim((data.g_j.adopted === null) >= (j === 0), () => `g of J = 0 is ${String(data.g_j.adopted)}`)
      the.claim(data.energy_invcm >= 0 && data.energy_invcm === level.energy_invcm && data.revision === level.revision, () => `energy ${data.energy_invcm}, the list says ${level.energy_invcm}`)
    }
  },
}

const lines: Check = {
  name: 'lines',
  claim: 'A line is the difference of its levels, its scales belong together, and its verdict is that of its levels.',
  async run(the) {
    if (the.lines.length === 0) throw new NothingToCheck('no level drawn has a line')
    for (const line of the.lines) {
      the.note('getTransition', { transition: line.id, kind: line.kind })
      const { lower, upper } = line
      the.claim(lower.energy_invcm < upper.energy_invcm && line.id === `${lower.id}~${upper.id}`, () => 'lower is not the lower')
      // one rounding of a difference, one of a quotient
      the.near(line.wavenumber_invcm, upper.energy_invcm - lower.energy_invcm, 2 ** -52 * upper.energy_invcm, 'wavenumber')
      the.near(line.wavelength_vac_nm * line.wavenumber_invcm, 1e7, 1e7 * 2 ** -51, 'wavelength times wavenumber')
      the.near(line.frequency_thz, line.wavenumber_invcm * 0.0299792458, line.frequency_thz * 2 ** -51, 'frequency')
      const change = Math.abs(lower.term.j - upper.term.j)
      the.claim(line.kind !== 'E1' || (lower.term.parity !== upper.term.parity && change <= 1 && lower.term.j + upper.term.j > 0), () => 'listed as E1 against parity or J')
      the.claim(line.verdict.allowed && line.verdict.rules.every((rule) => rule.basis !== 'rigorous' || rule.verdict !== 'fail'), () => 'listed against a rigorous rule')
    }
  },
}

export const TABLE_CHECKS: Check[] = [levels, lines, filters, windows, paging, order, strictness]
