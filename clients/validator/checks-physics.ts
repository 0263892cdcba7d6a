import { type Check, componentsOf, NothingToCheck } from './inquiry'

/** Half the distance of two neighbouring doubles at 1: the largest relative error of one rounding. */
const EPS = 2 ** -53

const sums: Check = {
  name: 'strengths of a line',
  claim: 'At small field the strengths of each q of a line sum to 1, and its intensities to 1 at every angle.',
  async run(the) {
    for (const line of the.lines) {
      const theta = the.random.between(0, 180)
      const answer = await componentsOf(the, line, { field: '1mT', model: 'linear', theta_deg: theta })
      if (answer === null || answer.components.some(({ strength }) => strength === null)) continue
      // each strength is a few roundings from exact, and none is above 1
      const allowed = 16 * EPS * answer.components.length
      for (const q of new Set(answer.components.map((one) => one.q))) {
        the.near(answer.components.filter((one) => one.q === q).reduce((sum, { strength }) => sum + (strength ?? Number.NaN), 0), 1, allowed, `strengths of q = ${q}`)
      }
      if (line.kind === 'E2') continue
      the.near(answer.components.reduce((sum, { intensity }) => sum + (intensity ?? Number.NaN), 0), 1, allowed, `intensities at ${theta} degrees`)
    }
  },
}

const scales: Check = {
  name: 'scales of a component',
  claim: 'Position is centre and shift; shifts in cm^-1, GHz and Lorentz units belong together; the linear law is linear.',
  async run(the) {
    for (const line of the.lines) {
      const field = the.random.magnitude(1e-3, 10)
      const [one, twice] = [await componentsOf(the, line, { field, model: 'linear' }), await componentsOf(the, line, { field: 2 * field, model: 'linear' })]
      if (one === null || twice === null) continue
      for (const [i, component] of one.components.entries()) {
        const size = Math.abs(component.shift_invcm)
        the.near(component.wavenumber_invcm, one.centre.wavenumber_invcm + component.shift_invcm, 2 * EPS * (one.centre.wavenumber_invcm + size), 'position')
        the.near(component.shift_ghz, component.shift_invcm * 29.9792458, 4 * EPS * 30 * size, 'shift in GHz')
        if (component.shift_lorentz !== null) the.near(component.shift_invcm, component.shift_lorentz * 0.46686447719 * one.field_tesla, 1e-10 * size + 1e-15, 'shift in Lorentz units')
        // the order of the components does not depend on the field in the linear law
        the.near(twice.components[i]?.shift_invcm, 2 * component.shift_invcm, 8 * EPS * size, 'shift at twice the field')
      }
    }
  },
}

const gravity: Check = {
  name: 'effective g',
  claim: 'g_eff and the second moments are those of the components: g_eff is the centre of gravity of sigma+.',
  async run(the) {
    for (const line of the.lines) {
      if (line.g_eff === null) continue
      const answer = await componentsOf(the, line, { field: '1T', model: 'linear' })
      if (answer === null) continue
      const mean = (q: number, power: number): number => {
        const group = answer.components.filter((one) => one.q === q)
        return group.reduce((sum, one) => sum + (one.strength ?? Number.NaN) * (one.shift_lorentz ?? Number.NaN) ** power, 0) / group.reduce((sum, one) => sum + (one.strength ?? Number.NaN), 0)
      }
      const largest = Math.max(...answer.components.map((one) => Math.abs(one.shift_lorentz ?? 0)), 1)
      const allowed = 64 * EPS * answer.components.length * largest ** 2
      the.near(line.g_eff, mean(1, 1), allowed, 'g_eff')
      const { pi_second: pi, sigma_first: first, sigma_second: second } = line.moments_lorentz
      if (pi !== null && answer.components.some((one) => one.q === 0 && one.strength !== 0)) the.near(pi, mean(0, 2), allowed, 'second moment of pi')
      if (first !== null) the.near(first, mean(1, 1), allowed, 'first moment of sigma+')
      if (second !== null) the.near(second, mean(1, 2), allowed, 'second moment of sigma+')
    }
  },
}

const conversions: Check = {
  name: 'wavelengths',
  claim: 'A conversion and its return come back to the number they began with, and all scales of one answer belong together.',
  async run(the) {
    const scales = ['vacuum_nm', 'air_nm', 'wavenumber_invcm', 'frequency_thz', 'energy_ev'] as const
    for (let i = 0; i < the.count; i += 1) {
      // where every scale exists: air from 200 nm on
      const value = the.random.magnitude(201, 20_000)
      const [from, to] = the.random.sample(scales, 2) as [(typeof scales)[number], (typeof scales)[number]]
      const { data: start } = await the.table.get('convertWavelength', { value, from: 'vacuum_nm', to: from })
      const given = start.result ?? Number.NaN
      const there = await the.table.get('convertWavelength', { value: given, from, to })
      const parameters = { value: there.data.result ?? Number.NaN, from: to, to: from }
      the.note('convertWavelength', parameters)
      const back = await the.table.get('convertWavelength', parameters)
      // a handful of roundings; the way from air to vacuum is iterated to the last digit but one
      the.near(back.data.result, given, 32 * EPS * given, `${from} by ${to} and back`)
      the.near(back.data.wavelength_vac_nm * back.data.wavenumber_invcm, 1e7, 1e7 * 8 * EPS, 'wavelength times wavenumber')
    }
  },
}

/** Share of the field where the linear law fails at which the intermediate model has to agree with it. */
const SMALL = 1e-3
const key = (one: { m_lower: number; m_upper: number }): string => `${one.m_lower} ${one.m_upper}`

const smallField: Check = {
  name: 'intermediate at small field',
  claim: 'At a small field the intermediate model gives the linear shifts; its departure grows with the square of the field.',
  async run(the) {
    let built = 0
    for (const line of the.lines) {
      const linear = await componentsOf(the, line, { field: '1mT', model: 'linear' })
      const limit = linear?.validity.positions.field_limit_tesla
      if (linear === null) continue
      const field = SMALL * Math.min(limit ?? 1, 1000)
      const [weak, strong] = [await componentsOf(the, line, { field, model: 'linear' }), await componentsOf(the, line, { field, model: 'intermediate' })]
      if (weak === null || strong === null) continue
      built += 1
      const unit = 0.46686447719 * field
      const largest = Math.max(...weak.components.map((one) => Math.abs(one.shift_invcm)), 0.01 * unit)
      const found = new Map(strong.components.map((one) => [key(one), one]))
      // at the limit linear errs by the tolerance; the error over the shift is in proportion to the field to leading order, with a factor of
      // three for the next; and shifts of 1e-3 T are kept to about 1e-13 cm^-1
      const allowed = 3 * SMALL * weak.validity.positions.tolerance * largest + 1e-12
      for (const one of weak.components) {
        const shift = found.get(key(one))?.shift_invcm
        the.near(shift, one.shift_invcm, allowed, `shift of ${key(one)} at ${field} T`)
      }
    }
    if (built === 0) throw new NothingToCheck('no line drawn can be computed in the intermediate model')
  },
}

export const PHYSICS_CHECKS: Check[] = [sums, scales, gravity, conversions, smallField]
