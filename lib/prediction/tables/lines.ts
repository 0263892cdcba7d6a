import type { Table } from '@/openapi/core/table'
import type { Component, HyperfineComponent } from '@/openapi/schemas/components'
import type { Level } from '@/openapi/schemas/level'
import type { Transition } from '@/openapi/schemas/transition'
import { flag, type Field, integer, number, tableOf, text } from '@/lib/prediction/tables/column'

const INVCM = 'cm-1'

const endOf = (end: 'lower' | 'upper'): Field<Transition>[] => {
  const of = (line: Transition): Level => line[end]
  return [
    text(`${end}_level`, `The ${end} level`, (t) => of(t).id),
    text(`${end}_configuration`, `Configuration of the ${end} level`, (t) => of(t).configuration),
    text(`${end}_term`, `Term symbol with J of the ${end} level`, (t) => of(t).term.symbol),
    number(`${end}_j`, null, `J of the ${end} level`, (t) => of(t).term.j),
    number(`${end}_energy_invcm`, INVCM, `Energy of the ${end} level`, (t) => of(t).energy_invcm),
    number(`${end}_g_j`, null, `Adopted g_J of the ${end} level`, (t) => of(t).g_j.adopted),
    text(`${end}_energy_source`, `Source of the energy of the ${end} level`, (t) => of(t).energy_source),
    text(`${end}_energy_evidence`, `How far the energy of the ${end} level was checked`, (t) => of(t).energy_evidence),
  ]
}

const failedRules = (t: Transition): string | null => t.verdict.rules.filter((rule) => rule.verdict === 'fail').map((rule) => rule.rule).join(' ') || null

export const LINE_FIELDS: readonly Field<Transition>[] = [
  text('id', 'Transition', (t) => t.id),
  text('species', 'Species', (t) => t.lower.species),
  text('kind', 'E1, M1 or E2', (t) => t.kind),
  number('wavenumber_invcm', INVCM, 'Vacuum wavenumber', (t) => t.wavenumber_invcm),
  number('wavenumber_unc_invcm', INVCM, 'One standard deviation of the wavenumber', (t) => t.wavenumber_unc_invcm),
  number('wavelength_vac_nm', 'nm', 'Wavelength in vacuum', (t) => t.wavelength_vac_nm),
  number('wavelength_air_nm', 'nm', 'Wavelength in standard air, from 200 nm up', (t) => t.wavelength_air_nm),
  number('wavelength_conventional_nm', 'nm', 'Wavelength in the conventional medium', (t) => t.wavelength_conventional_nm),
  text('conventional_medium', 'Air from 200 to 2000 nm, vacuum outside', (t) => t.conventional_medium),
  number('frequency_thz', 'THz', 'Frequency', (t) => t.frequency_thz),
  flag('allowed', 'The rigorous rules of the kind are met', (t) => t.verdict.allowed),
  flag('ls', 'The LS rules are met too; empty where they do not apply', (t) => t.verdict.ls),
  flag('intercombination', 'Allowed, and changes S', (t) => t.verdict.intercombination),
  text('failed_rules', 'Rules that fail', failedRules),
  number('g_eff', null, 'Effective Landé factor', (t) => t.g_eff),
  text('pattern', 'unsplit, normal, triplet or anomalous', (t) => t.pattern),
  number('pi_second_lorentz2', null, 'Mean of shift^2 of pi, in Lorentz units squared', (t) => t.moments_lorentz.pi_second),
  number('sigma_first_lorentz', null, 'Mean shift of sigma+, in Lorentz units', (t) => t.moments_lorentz.sigma_first),
  number('sigma_second_lorentz2', null, 'Mean of shift^2 of sigma+, in Lorentz units squared', (t) => t.moments_lorentz.sigma_second),
  ...endOf('lower'),
  ...endOf('upper'),
]

export const lineTable = (lines: Iterable<Transition>): Table => tableOf('transitions', LINE_FIELDS, lines)

const COMPONENT_FIELDS: readonly Field<Component>[] = [
  number('j_lower', null, 'J of the lower sublevel, by continuity from zero field', (c) => c.j_lower),
  number('m_lower', null, 'm of the lower level', (c) => c.m_lower),
  number('j_upper', null, 'J of the upper sublevel, by continuity from zero field', (c) => c.j_upper),
  number('m_upper', null, 'm of the upper level', (c) => c.m_upper),
  integer('q', 'm_upper - m_lower', (c) => c.q),
  text('polarisation', 'pi, sigma+ or sigma-; q itself where |q| = 2', (c) => c.polarisation),
  number('m_l_lower', null, 'M_L of the lower sublevel at high field', (c) => c.m_l_lower),
  number('m_s_lower', null, 'M_S of the lower sublevel at high field', (c) => c.m_s_lower),
  number('m_l_upper', null, 'M_L of the upper sublevel at high field', (c) => c.m_l_upper),
  number('m_s_upper', null, 'M_S of the upper sublevel at high field', (c) => c.m_s_upper),
  number('shift_lorentz', null, 'Shift in Lorentz units', (c) => c.shift_lorentz),
  number('shift_invcm', INVCM, 'Shift in wavenumber; positive is to the blue', (c) => c.shift_invcm),
  number('shift_ghz', 'GHz', 'Shift in frequency', (c) => c.shift_ghz),
  number('shift_mhz', 'MHz', 'Shift in MHz', (c) => c.shift_mhz),
  number('shift_pm', 'pm', 'Shift in wavelength, in the medium asked for', (c) => c.shift_pm),
  number('wavenumber_invcm', INVCM, 'Vacuum wavenumber', (c) => c.wavenumber_invcm),
  number('wavelength_vac_nm', 'nm', 'Wavelength in vacuum', (c) => c.wavelength_vac_nm),
  number('wavelength_air_nm', 'nm', 'Wavelength in standard air, from 200 nm up', (c) => c.wavelength_air_nm),
  number('frequency_thz', 'THz', 'Frequency', (c) => c.frequency_thz),
  number('derivative_invcm_per_tesla', 'cm-1 / T', 'Change of the position with the field', (c) => c.derivative_invcm_per_tesla),
  number('strength', null, 'Relative strength; each q sums to 1 at zero field', (c) => c.strength),
  number('intensity', null, 'Strength seen at the angle, or averaged over angle', (c) => c.intensity),
  number('stokes_q', null, 'Stokes Q at the angle', (c) => c.stokes_q),
  number('stokes_v', null, 'Stokes V at the angle', (c) => c.stokes_v),
  text('vanishes_by', 'The rule that makes the strength zero', (c) => c.vanishes_by),
  number('wavenumber_unc_invcm', INVCM, 'One standard deviation of the wavenumber', (c) => c.wavenumber_unc_invcm),
  number('wavenumber_known_unc_invcm', INVCM, 'Its known parts alone', (c) => c.wavenumber_known_unc_invcm),
]

export const componentTable = (components: Iterable<Component>): Table => tableOf('components', COMPONENT_FIELDS, components)

const HYPERFINE_COMPONENT_FIELDS: readonly Field<HyperfineComponent>[] = [
  integer('mass_number', 'Isotope', (c) => c.mass_number),
  number('f_lower', null, 'F of the lower sublevel, by continuity from zero field', (c) => c.f_lower),
  number('m_f_lower', null, 'm_F of the lower sublevel', (c) => c.m_f_lower),
  number('f_upper', null, 'F of the upper sublevel, by continuity from zero field', (c) => c.f_upper),
  number('m_f_upper', null, 'm_F of the upper sublevel', (c) => c.m_f_upper),
  integer('q', 'm_F upper - m_F lower', (c) => c.q),
  text('polarisation', 'pi, sigma+ or sigma-; q itself where |q| = 2', (c) => c.polarisation),
  number('m_j_lower', null, 'm_J of the lower sublevel at high field', (c) => c.m_j_lower),
  number('m_i_lower', null, 'm_I of the lower sublevel at high field', (c) => c.m_i_lower),
  number('m_j_upper', null, 'm_J of the upper sublevel at high field', (c) => c.m_j_upper),
  number('m_i_upper', null, 'm_I of the upper sublevel at high field', (c) => c.m_i_upper),
  number('detuning_mhz', 'MHz', 'From the line between the centres of gravity of both levels', (c) => c.detuning_mhz),
  number('derivative_mhz_per_tesla', 'MHz / T', 'Change of the detuning with the field', (c) => c.derivative_mhz_per_tesla),
  number('shift_invcm', INVCM, 'The detuning in wavenumber', (c) => c.shift_invcm),
  number('shift_ghz', 'GHz', 'The detuning in GHz', (c) => c.shift_ghz),
  number('shift_pm', 'pm', 'The detuning in wavelength, in the medium asked for', (c) => c.shift_pm),
  number('wavenumber_invcm', INVCM, 'Vacuum wavenumber', (c) => c.wavenumber_invcm),
  number('wavelength_vac_nm', 'nm', 'Wavelength in vacuum', (c) => c.wavelength_vac_nm),
  number('wavelength_air_nm', 'nm', 'Wavelength in standard air, from 200 nm up', (c) => c.wavelength_air_nm),
  number('frequency_thz', 'THz', 'Frequency', (c) => c.frequency_thz),
  number('strength', null, 'Relative strength; over one isotope all sum to 1', (c) => c.strength),
  number('weight', null, 'Share of the isotope', (c) => c.weight),
  number('intensity', null, 'Strength times weight seen at the angle, or averaged over angle', (c) => c.intensity),
  number('stokes_q', null, 'Stokes Q at the angle', (c) => c.stokes_q),
  number('stokes_v', null, 'Stokes V at the angle', (c) => c.stokes_v),
  number('detuning_unc_mhz', 'MHz', 'One standard deviation of the detuning', (c) => c.detuning_unc_mhz),
  number('detuning_known_unc_mhz', 'MHz', 'Its known parts alone', (c) => c.detuning_known_unc_mhz),
]

export const hyperfineComponentTable = (components: Iterable<HyperfineComponent>): Table => tableOf('hyperfine-components', HYPERFINE_COMPONENT_FIELDS, components)
