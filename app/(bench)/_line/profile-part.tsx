'use client'
import { useQuery } from '@tanstack/react-query'
import { memo, useId, useState } from 'react'
import { benchSentence, STOKES_CONVENTIONS } from '@/lib/atomic/profile-stokes'
import { massOf } from '@/lib/prediction/profiles-mass'
import type { Species } from '@/openapi/schemas/species'
import type { TransitionDetail } from '@/openapi/schemas/transition'
import { apiQuery } from '@/app/_components/data/api'
import { useEdition } from '@/app/_components/data/edition'
import { type SeenWidth, useSeenWidth } from '@/app/_components/field/use-model'
import { Notice } from '@/app/_components/notice'
import { significant } from '@/app/_components/number'
import { Part } from '@/app/_components/page-head'
import { ProfilePlot } from '@/app/_components/plots/profile-plot'
import type { PredictionAsked } from './use-prediction'
import { type ProfiledNucleus, useProfile } from './use-profile'

interface ProfilePartProps {
  line: TransitionDetail
  asked: PredictionAsked
  nuclear?: ProfiledNucleus | null
}

/** The isotope whose mass is taken; of several that are shown together the mean by abundance. */
const isotopeOf = (nuclear: ProfiledNucleus | null): number | null => (typeof nuclear?.isotope === 'number' ? nuclear.isotope : null)

/** What an instrument of finite width would record: Stokes I, and V and Q at an angle. */
export const ProfilePart = memo(function ProfilePart({ line, asked, nuclear = null }: ProfilePartProps) {
  const { param: edition } = useEdition()
  const [width, setWidth] = useSeenWidth()
  const { data, isPending } = useQuery({ ...apiQuery<Species>(`/species/${line.lower.species}`, { edition }), enabled: width.temperatureK > 0 })
  const massU = massOf(data?.data ?? null, { line: null, all: null, isotope: isotopeOf(nuclear) }).u
  const waiting = width.temperatureK > 0 && isPending
  const profiled = useProfile(line, { asked, width: waiting ? { ...width, temperatureK: 0 } : width, massU, nuclear })
  return (
    <Part title="Seen with an instrument" aside={profiled.ok ? `One component is ${significant(profiled.fwhmInvcm, 3)} cm⁻¹ wide (full width at half maximum)` : undefined}>
      <WidthControl width={width} onChange={setWidth} centreInvcm={line.wavenumber_invcm} />
      <div className="mt-4">
        {profiled.ok ? (
          <ProfilePlot profile={profiled.profile} centreInvcm={line.wavenumber_invcm} fieldTesla={asked.fieldTesla} thetaDeg={asked.thetaDeg} name={line.id.replace('~', '_')} note={nuclear === null ? undefined : 'With hyperfine structure.'} />
        ) : (
          <Notice tone="warn" title="No profile can be drawn."><p>{profiled.detail}</p></Notice>
        )}
      </div>
      <p className="note mt-2 max-w-[60rem]">
        {asked.thetaDeg === null ? null : <>Sign of V: {STOKES_CONVENTIONS.iau}. {STOKES_CONVENTIONS.q}. {'Absorption takes away what emission adds. '}</>}
        {benchSentence({ thetaDeg: asked.thetaDeg })}
      </p>
    </Part>
  )
})

interface NumberBoxProps {
  label: string
  unit: string
  value: number | null
  hint?: string
  onChange: (value: number) => void
}

/** A positive number; what is not one yet is kept in the box and changes nothing. */
function NumberBox({ label, unit, value, hint, onChange }: NumberBoxProps) {
  const id = useId()
  const [draft, setDraft] = useState<string | null>(null)
  const read = draft === null || draft.trim() === '' ? null : Number(draft.replace(',', '.').replace(/\s/g, ''))
  const wrong = read !== null && !(Number.isFinite(read) && read >= 0)
  return (
    <span className="flex items-center gap-2 text-sm">
      <label htmlFor={id} className="text-xs font-medium text-muted">{label}</label>
      <input id={id} className="input num w-28! min-h-8!" inputMode="decimal" autoComplete="off" placeholder={hint} value={draft ?? (value === null ? '' : String(value))} aria-invalid={wrong || undefined}
        onChange={(event) => {
          setDraft(event.target.value)
          const next = event.target.value.trim() === '' ? 0 : Number(event.target.value.replace(',', '.').replace(/\s/g, ''))
          if (Number.isFinite(next) && next >= 0) onChange(next)
        }}
        onBlur={() => setDraft(null)}
      />
      <span className="text-muted">{unit}</span>
    </span>
  )
}

/** The instrument as a resolving power or a width, and the temperature of the source. */
function WidthControl({ width, onChange, centreInvcm }: { width: SeenWidth; onChange: (width: SeenWidth) => void; centreInvcm: number }) {
  const id = useId()
  const fwhm = width.instrument === 'fwhm'
  return (
    <div role="group" aria-label="What broadens the line" className="sheet flex min-w-0 flex-wrap items-center gap-x-6 gap-y-2 px-4 py-2.5">
      <span className="flex flex-wrap items-center gap-x-2 gap-y-1">
        <label htmlFor={`${id}-kind`} className="text-xs font-medium text-muted">Instrument</label>
        <select id={`${id}-kind`} className="input w-auto! min-h-8!" value={width.instrument}
          onChange={(event) => {
            const instrument = event.target.value === 'fwhm' ? 'fwhm' : 'resolving'
            if (instrument !== width.instrument) onChange({ ...width, instrument, value: Number((centreInvcm / width.value).toPrecision(3)) })
          }}
        >
          <option value="resolving">resolving power</option>
          <option value="fwhm">full width</option>
        </select>
        <NumberBox label={fwhm ? 'FWHM' : 'R'} unit={fwhm ? 'cm⁻¹' : ''} value={width.value} onChange={(value) => value > 0 && onChange({ ...width, value })} />
      </span>
      <NumberBox label="Temperature" unit="K" hint="none" value={width.temperatureK > 0 ? width.temperatureK : null} onChange={(temperatureK) => onChange({ ...width, temperatureK })} />
    </div>
  )
}
