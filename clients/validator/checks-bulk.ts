import { type Body, interpolate, type PredictionBlock, type Transition, verifyFieldTable } from '../typescript'
import { type Check, componentsOf, type Inquiry, NothingToCheck, unlessImpossible } from './inquiry'

const EPS = 2 ** -53
const tesla = (values: number[]) => ({ values, unit: 'T' as const })
const electric = (lines: readonly Transition[]): Transition[] => lines.filter((line) => line.kind === 'E1')

async function block(the: Inquiry, body: Body<'predict'>): Promise<PredictionBlock | null> {
  the.note('predict', {}, body)
  return (await unlessImpossible(the.table.post('predict', body)))?.data[0] ?? null
}
const rowsOf = (strengths: PredictionBlock['strengths']): number[][] => (strengths === null ? [] : typeof strengths[0] === 'number' ? [strengths as number[]] : (strengths as number[][]))

const derivatives: Check = {
  name: 'derivatives',
  claim: 'Lines move with the field by their derivatives.',
  async run(the) {
    the.needs('post /predictions')
    for (const line of electric(the.lines)) {
      const field = the.random.magnitude(0.01, 20)
      const h = field / 64
      const body = { lines: [{ transition: line.id }], field: tesla([field - 2 * h, field - h, field, field + h, field + 2 * h]), quantity: 'shift_invcm' as const, derivatives: true, model: 'auto' as const }
      const answer = await block(the, body)
      if (answer === null) continue
      const at = (f: number, c: number): number => answer.values[f]?.[c] ?? Number.NaN
      for (const [c, q] of answer.q.entries()) {
        const [near, far] = [(at(3, c) - at(1, c)) / (2 * h), (at(4, c) - at(0, c)) / (4 * h)]
        // a central difference errs by h^2 to leading order, so that of twice the step by four times as much: their difference is three errors.
        // Shifts are kept to a few roundings of the splitting of the terms, which is below 1e5 cm^-1
        the.near(answer.derivatives?.[2]?.[c], near, Math.abs(far - near) + (1e-10 + 64 * EPS * Math.abs(at(2, c))) / h, `derivative of component ${c} (q = ${q}) at ${field} T`)
      }
    }
  },
}

const sums: Check = {
  name: 'strengths of a multiplet',
  claim: 'The strengths of each q over a multiplet keep their sum, a third, at any field.',
  async run(the) {
    the.needs('post /predictions')
    const fields = [0, 0.1, 1, 10, 100, 1000]
    for (const line of electric(the.lines)) {
      const answer = await block(the, { multiplets: [{ transition: line.id }], field: tesla(fields), model: 'intermediate' })
      if (answer === null || answer.strengths === null) continue
      for (const [f, strengths] of rowsOf(answer.strengths).entries()) {
        for (const q of [-1, 0, 1]) {
          const sum = strengths.reduce((total, strength, c) => total + (answer.q[c] === q ? strength : 0), 0)
          // vectors are orthogonal to some 1e-15, and no strength is above 1
          the.near(sum, 1 / 3, 1e-13 * Math.sqrt(strengths.length), `strengths of q = ${q} at ${String(fields[f])} T`)
        }
      }
    }
  },
}

const oneAndMany: Check = {
  name: 'one and many',
  claim: 'A line asked alone and in bulk has the same positions and strengths.',
  async run(the) {
    the.needs('post /predictions')
    for (const line of electric(the.lines)) {
      const field = the.random.magnitude(1e-3, 20)
      for (const model of ['linear', 'intermediate'] as const) {
        const single = await componentsOf(the, line, { field, model })
        const answer = await block(the, { lines: [{ transition: line.id }], field: tesla([field]), model })
        the.claim((single === null) === (answer === null), () => `the ${model} model is refused in one way and answered in the other`)
        if (single === null || answer === null) continue
        const many = new Map(answer.q.map((_, c) => [`${answer.m_lower[c]} ${answer.m_upper[c]}`, c]))
        the.claim(many.size === single.components.length, () => `${many.size} components in bulk, ${single.components.length} alone`)
        const strengths = rowsOf(answer.strengths)[0]
        for (const one of single.components) {
          const c = many.get(`${one.m_lower} ${one.m_upper}`) ?? -1
          // two eigensolvers: positions are promised to 1e-9 cm^-1 and 4e-12 of themselves, by each
          the.near(answer.values[0]?.[c], one.wavenumber_invcm, 2e-9 + 8e-12 * Math.abs(one.wavenumber_invcm), `position of ${one.m_lower} to ${one.m_upper}, ${model}`)
          if (one.strength !== null) the.near(strengths?.[c], one.strength, 1e-9, `strength of ${one.m_lower} to ${one.m_upper}, ${model}`)
        }
      }
    }
  },
}

const fieldTables: Check = {
  name: 'field tables',
  claim: 'A field table has the checksum it says, and between its nodes it is as close to the model as it says.',
  async run(the) {
    the.needs('post /predictions', 'post /field-tables')
    for (const line of electric(the.lines)) {
      const body = { multiplet: { transition: line.id }, field: { start: 0.5, stop: 2, unit: 'T' as const }, max_error_invcm: 1e-6, max_strength_error: 1e-5 }
      the.note('makeFieldTable', {}, body)
      const table = (await unlessImpossible(the.table.post('makeFieldTable', body)))?.data
      if (table === undefined) continue
      the.claim(await verifyFieldTable(table).then(() => true, () => false), () => 'the checksum differs')
      the.claim(table.max_error_invcm <= body.max_error_invcm, () => `the error told, ${table.max_error_invcm}, is above the one allowed`)
      const fields = Array.from({ length: 4 }, () => the.random.between(0.5, 2))
      const model = await block(the, { multiplets: [{ transition: line.id }], field: tesla(fields), model: 'intermediate' })
      if (model === null) continue
      for (const [f, field] of fields.entries()) {
        const read = interpolate(table, field)
        const worst = read.positions.reduce((most, position, c) => Math.max(most, Math.abs(position - (model.values[f]?.[c] ?? Number.NaN))), 0)
        const largest = Math.max(...read.positions.map(Math.abs))
        the.near(worst, 0, table.max_error_invcm + 16 * EPS * largest, `farthest position at ${field} T`)
        if (read.strengths === null || table.max_strength_error === null) continue
        const strengths = rowsOf(model.strengths)[f] ?? []
        the.near(read.strengths.reduce((most, strength, c) => Math.max(most, Math.abs(strength - (strengths[c] ?? Number.NaN))), 0), 0, table.max_strength_error + 1e-12, `farthest strength at ${field} T`)
      }
    }
  },
}

const fits: Check = {
  name: 'field fits',
  claim: "A field fitted to a line's own positions is the field they were computed at.",
  async run(the) {
    the.needs('post /field-fits')
    for (const line of electric(the.lines)) {
      const field = the.random.magnitude(0.1, 5)
      const single = await componentsOf(the, line, { field, model: 'linear' })
      const moved = single?.components.filter((one) => one.strength !== null && one.strength > 0) ?? []
      const spread = Math.max(...moved.map((one) => Math.abs(one.shift_invcm)), 0)
      if (moved.length < 2 || spread < 0.01) continue
      const body = {
        lines: [{ transition: line.id }], unit: 'cm-1' as const, model: 'linear' as const,
        measurements: moved.map((one) => ({ line: 0, position: one.wavenumber_invcm, position_unc: 0.001, m_lower: one.m_lower, m_upper: one.m_upper })),
      }
      the.note('fitField', {}, body)
      const fit = (await unlessImpossible(the.table.post('fitField', body)))?.data
      if (fit === undefined) continue
      the.claim(fit.status === 'determined', () => 'the fit is undetermined')
      // positions are rounded to their last digit, of which the shifts keep what is left
      if (fit.status === 'determined' && fit.unknown === 'field') the.near(fit.field_tesla, field, (field * 16 * EPS * line.wavenumber_invcm) / spread + 1e-12, 'field')
    }
    if (the.claims === 0) throw new NothingToCheck('no line drawn splits by more than its noise')
  },
}

export const BULK_CHECKS: Check[] = [derivatives, sums, oneAndMany, fieldTables, fits]
