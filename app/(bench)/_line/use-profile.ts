'use client'
import { useMemo } from 'react'
import { PhysicsError } from '@/lib/atomic/errors'
import { profilesOver, readyLines } from '@/lib/prediction/profiles'
import type { Isotope } from '@/openapi/schemas/species'
import type { TransitionDetail } from '@/openapi/schemas/transition'
import type { IsotopeChosen, SeenWidth } from '@/app/_components/field/use-model'
import type { LineProfile } from '@/app/_components/plots/profile-plot'
import { componentsAsked, type PredictionAsked } from './use-prediction'

export type Profiled = { ok: true; profile: LineProfile; fwhmInvcm: number } | { ok: false; detail: string }

/** Points on a full width, how many widths about a component are drawn, and how many points at most. */
const A_WIDTH = 8
const WIDTHS_ABOUT = 3
const MOST = 4000

/** Wavenumbers close together about every component and none in the dark between them, where a straight line is the profile. */
function gridAbout(positions: readonly number[], fwhm: number): Float64Array {
  const reach = WIDTHS_ABOUT * fwhm
  const stretches: [number, number][] = []
  for (const at of [...positions].sort((a, b) => a - b)) {
    const last = stretches.at(-1)
    if (last && at - reach <= last[1]) last[1] = at + reach
    else stretches.push([at - reach, at + reach])
  }
  const length = stretches.reduce((sum, [from, to]) => sum + to - from, 0)
  const step = Math.max(fwhm / A_WIDTH, length / MOST)
  return Float64Array.from(stretches.flatMap(([from, to]) => {
    const count = Math.max(2, Math.ceil((to - from) / step))
    return Array.from({ length: count + 1 }, (_, i) => from + ((to - from) * i) / count)
  }))
}

/** Isotopes of the species, and which of them are shown with their hyperfine structure. */
export interface ProfiledNucleus {
  isotopes: readonly Isotope[]
  isotope: IsotopeChosen
}

interface ProfileAsked {
  asked: PredictionAsked
  width: SeenWidth
  /** u; null where it is not known. */
  massU: number | null
  nuclear: ProfiledNucleus | null
}

function profileOf(line: TransitionDetail, { asked, width, massU, nuclear }: ProfileAsked): Profiled {
  const { ready, refused } = readyLines(
    [{ line, weight: 1, massU, isotopes: nuclear?.isotopes ?? [] }],
    {
      ...componentsAsked(asked),
      hyperfine: nuclear === null ? null : { isotope: nuclear.isotope },
      temperatureK: width.temperatureK > 0 ? width.temperatureK : null,
      microturbulenceKmPerS: null,
      instrumentFwhmInvcm: width.instrument === 'fwhm' ? width.value : null,
      resolvingPower: width.instrument === 'resolving' ? width.value : null,
      lorentzianFwhmInvcm: null,
    },
  )
  const [first] = ready
  if (first === undefined) return { ok: false, detail: refused[0]?.error.detail ?? 'This line has no profile.' }
  const centre = line.wavenumber_invcm
  const positions = first.profile.components.filter(({ strength }) => strength > 0).map(({ positionInvcm }) => positionInvcm)
  const grid = gridAbout(positions, first.fwhmInvcm)
  const { intensity, stokesQ, stokesV } = profilesOver(ready, grid, { thetaDeg: asked.thetaDeg })
  return { ok: true, fwhmInvcm: first.fwhmInvcm, profile: { shiftsInvcm: grid.map((at) => at - centre), intensity, stokesQ, stokesV } }
}

/** The Stokes profiles of the line, by the function behind `POST /profiles`. */
export function useProfile(line: TransitionDetail, { asked, width, massU, nuclear }: ProfileAsked): Profiled {
  return useMemo(() => {
    try {
      return profileOf(line, { asked, width, massU, nuclear })
    } catch (error) {
      if (error instanceof PhysicsError) return { ok: false, detail: error.detail }
      throw error
    }
  }, [line, asked, width, massU, nuclear])
}
