'use client'
import { useCallback, useMemo } from 'react'
import { GHZ_PER_INVCM } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import { hyperfineSublevelsOf, type NuclearLevel, readyNuclearLevel } from '@/lib/prediction/hyperfine'
import { halves } from '@/app/_components/number'
import type { HyperfineSublevel } from '@/openapi/schemas/level'
import { type Fan, type FanPoint, hyperfineFan, linearFan } from './fan'

const ADOPTED = { gValues: 'adopted', gS: null } as const
const MHZ_PER_INVCM = GHZ_PER_INVCM * 1000

const pointOf = ({ f, m_f, m_j, m_i, energy_mhz, shift_mhz }: HyperfineSublevel): FanPoint => ({
  key: `${Math.round(2 * m_j)}:${Math.round(2 * m_i)}`,
  name: f === null ? halves(m_f) : `${halves(f)}, ${halves(m_f)}`,
  far: `${halves(m_j)}, ${halves(m_i)}`,
  energyInvcm: energy_mhz / MHZ_PER_INVCM,
  shiftInvcm: shift_mhz / MHZ_PER_INVCM,
})

type Sublevels = ReturnType<typeof hyperfineSublevelsOf>

interface NuclearFan {
  sublevels: Sublevels | null
  here: FanPoint[]
  fanTo: (edgeTesla: number) => Fan
  /** Why there is none. */
  problem: string | null
}

/** The hyperfine sublevels of a level at the field in force, by the function behind the API, and their curves up to any edge. */
export function useNuclearFan(found: NuclearLevel | null, isotope: number | null, fieldTesla: number): NuclearFan {
  const ready = useMemo(() => {
    if (found === null) return null
    try {
      return { ok: true as const, ...readyNuclearLevel(found, { ...ADOPTED, isotope }) }
    } catch (error) {
      if (error instanceof PhysicsError) return { ok: false as const, detail: error.detail }
      throw error
    }
  }, [found, isotope])
  const sublevels = useMemo(() => (found === null || !ready?.ok ? null : hyperfineSublevelsOf(found, { ...ADOPTED, fieldTesla, isotope, amplitudes: false })), [found, ready, fieldTesla, isotope])
  const here = useMemo(() => sublevels?.rows.map(pointOf) ?? [], [sublevels])
  const fanTo = useCallback((edgeTesla: number) => (ready?.ok ? hyperfineFan(ready.ready, edgeTesla) : linearFan(0, null, edgeTesla)), [ready])
  return { sublevels, here, fanTo, problem: ready === null || ready.ok ? null : ready.detail }
}
