'use client'
import { memo, useDeferredValue, useId, useMemo } from 'react'
import { parseAsString, useQueryState } from 'nuqs'
import { PhysicsError } from '@/lib/atomic/errors'
import { coupledRange } from '@/lib/atomic/half'
import { type CrossingsAsked, crossingsOf, type SublevelPair } from '@/lib/prediction/crossings'
import type { FieldLevel } from '@/lib/prediction/level-sublevels'
import { twice } from '@/lib/prediction/levels'
import type { Isotope } from '@/openapi/schemas/species'
import type { Crossings, LevelDetail } from '@/openapi/schemas/level'
import { parseField } from '@/lib/units/field'
import type { Nucleus } from '@/app/_components/field/use-model'
import { halves, significant } from '@/app/_components/number'
import { Part } from '@/app/_components/page-head'
import { signed } from '@/app/_components/plots/ruler'
import { Symbols } from '@/app/_components/plots/symbols'
import { RequestPanel } from '@/app/_components/request-panel'

interface Props {
  level: LevelDetail
  found: FieldLevel
  isotopes: readonly Isotope[] | null
  nucleus: Nucleus
}

const nameOf = ({ twoF, twoM }: SublevelPair): string => `${twoF / 2},${twoM / 2}`
const readName = (text: string | null): SublevelPair | null => {
  const [f, m] = (text ?? '').split(',').map(Number)
  return f !== undefined && m !== undefined && Number.isFinite(f) && Number.isFinite(m) ? { twoF: twice(f), twoM: twice(m) } : null
}

/** Every sublevel by its zero-field name: of the term, or of one isotope's F. */
function namesOf({ level, members }: FieldLevel, spin: number | null): SublevelPair[] {
  const tops = spin === null ? members.levels.map((member) => twice(member.j)) : coupledRange(twice(level.term.j), twice(spin))
  return tops.flatMap((twoF) => Array.from({ length: twoF + 1 }, (_, i) => ({ twoF, twoM: twoF - 2 * i })))
}

type Answer = { ok: true; crossings: Crossings } | { ok: false; detail: string }

/** Where two sublevels cross, come nearest, or keep their distance to first order in the field. */
export const CrossingsPart = memo(function CrossingsPart({ level, found, isotopes, nucleus }: Props) {
  const [a, setA] = useQueryState('a', parseAsString)
  const [b, setB] = useQueryState('b', parseAsString)
  const [to, setTo] = useQueryState('to', parseAsString)
  const id = useId()
  const nuclear = nucleus.on
  const isotope = nucleus.isotope === 'natural' ? null : nucleus.isotope
  const spin = nuclear ? (isotopes?.find((one) => one.mass_number === isotope)?.nuclear_spin ?? null) : null
  const names = useMemo(() => namesOf(found, spin), [found, spin])
  const chosen = useMemo(() => {
    const known = (name: SublevelPair | null) => (name !== null && names.some((one) => one.twoF === name.twoF && one.twoM === name.twoM) ? name : null)
    return { first: known(readName(a)), second: known(readName(b)), until: parseField(to ?? '1T') }
  }, [a, b, to, names])
  const { first, second, until } = chosen
  const wanted = useMemo(() => (chosen.first === null || chosen.second === null || !chosen.until.ok ? null : { a: chosen.first, b: chosen.second, toTesla: chosen.until.tesla }), [chosen])
  const settled = useDeferredValue(wanted)
  const answer = useMemo((): Answer | null => {
    if (settled === null || isotopes === null) return null
    const asked: CrossingsAsked = { ...settled, gValues: 'adopted', gS: null, fromTesla: 0, hyperfine: nuclear, isotope }
    try {
      return { ok: true, ...crossingsOf({ level, constants: level.hyperfine_constants, isotopes }, found.members, asked) }
    } catch (error) {
      if (error instanceof PhysicsError) return { ok: false, detail: error.detail }
      throw error
    }
  }, [settled, isotopes, level, found, nuclear, isotope])
  if (names.length < 2) return null

  return (
    <Part title="Where two sublevels meet" aside={nuclear ? <Symbols text="F, m_F of the isotope chosen" /> : 'J, m of the term'}>
      <div className="flex flex-wrap items-end gap-x-4 gap-y-3">
        <Choice id={`${id}-a`} label="One sublevel" names={names} value={first} onChange={setA} nuclear={nuclear} />
        <Choice id={`${id}-b`} label="and another" names={names} value={second} onChange={setB} nuclear={nuclear} />
        <div>
          <label htmlFor={`${id}-to`} className="label">up to</label>
          <input id={`${id}-to`} className="input num w-28!" autoComplete="off" spellCheck={false} value={to ?? '1T'} aria-invalid={!until.ok || undefined} aria-describedby={until.ok ? undefined : `${id}-wrong`} onChange={(event) => void setTo(event.target.value.slice(0, 40))} />
        </div>
      </div>
      {until.ok ? null : <p id={`${id}-wrong`} role="alert" className="mt-2 text-sm text-bad">{until.detail}</p>}
      <div className="mt-4">
        {answer === null ? <p className="note">Choose two sublevels to see where they cross, where they come nearest, and where their difference does not change with the field.</p> : answer.ok ? <Found crossings={answer.crossings} /> : <p className="text-sm text-warn">{answer.detail}</p>}
      </div>
      {wanted === null ? null : (
        <RequestPanel withLink={false} title="The request behind these fields" path={`/levels/${level.id}/crossings`} query={{ a: nameOf(wanted.a), b: nameOf(wanted.b), to: to ?? '1T', ...(nuclear ? { hyperfine: 'true', isotope } : {}) }} />
      )}
    </Part>
  )
})

function Choice({ id, label, names, value, onChange, nuclear }: { id: string; label: string; names: readonly SublevelPair[]; value: SublevelPair | null; onChange: (name: string | null) => void; nuclear: boolean }) {
  return (
    <div>
      <label htmlFor={id} className="label">{label}</label>
      <select id={id} className="input w-44!" value={value === null ? '' : nameOf(value)} onChange={(event) => void onChange(event.target.value === '' ? null : event.target.value)}>
        <option value="">choose</option>
        {names.map((name) => (
          <option key={nameOf(name)} value={nameOf(name)}>{`${nuclear ? 'F' : 'J'} = ${halves(name.twoF / 2)}, m = ${halves(name.twoM / 2)}`}</option>
        ))}
      </select>
    </div>
  )
}

interface Line {
  what: string
  tesla: number
  gauss: number
  mhz: string
  more: string
}

function Found({ crossings: { a, b, crossings, anticrossings, stationary, to_tesla } }: { crossings: Crossings }) {
  const lines: Line[] = [
    ...crossings.map((one) => ({ what: 'they cross', tesla: one.field_tesla, gauss: one.field_gauss, mhz: '0', more: `${signed(one.slope_mhz_per_tesla, 5)} MHz/T` })),
    ...anticrossings.map((one) => ({ what: 'they come nearest', tesla: one.field_tesla, gauss: one.field_gauss, mhz: signed(one.gap_mhz, 8), more: `${significant(one.gap_invcm, 4)} cm⁻¹` })),
    ...stationary.map((one) => ({ what: `the difference is stationary, a ${one.kind}`, tesla: one.field_tesla, gauss: one.field_gauss, mhz: signed(one.difference_mhz, 10), more: `${signed(one.curvature_mhz_per_tesla2, 4)} MHz/T²` })),
  ].sort((one, other) => one.tesla - other.tesla)
  if (lines.length === 0) return <p className="note"><Symbols text={`${a.name} and ${b.name}`} /> neither cross nor keep their distance anywhere above zero up to {to_tesla} T.</p>
  return (
    <div className="scroll-x" tabIndex={0} role="region" aria-label="Where the two sublevels meet, scrolls sideways">
      <table className="ruled">
        <caption className="note pb-1 text-left"><Symbols text={`${a.name} and ${b.name}`} />, up to {to_tesla} T</caption>
        <thead>
          <tr>
            <th scope="col">Where</th>
            <th scope="col" className="right">Field, T</th>
            <th scope="col" className="right">Field, G</th>
            <th scope="col" className="right">Difference, MHz</th>
            <th scope="col" className="right">Slope or curvature</th>
          </tr>
        </thead>
        <tbody>
          {lines.map((line) => (
            <tr key={`${line.what} ${line.tesla}`}>
              <th scope="row">{line.what}</th>
              <td className="right" title={String(line.tesla)}>{significant(line.tesla, 7)}</td>
              <td className="right" title={String(line.gauss)}>{significant(line.gauss, 7)}</td>
              <td className="right">{line.mhz}</td>
              <td className="right">{line.more}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}
