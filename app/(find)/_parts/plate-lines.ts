import type { Transition } from '@/openapi/schemas/transition'
import { serverGet } from '../../_components/data/server-get'

// An edition never changes, so its plate is drawn once per process; `latest` is looked at again after a minute.
const kept = new Map<string, { until: number; lines: number[] }>()

/** Wavelengths (nm, in air above 200 nm) of the edition's allowed lines in a window; empty where they cannot be read. */
export async function plateLines(edition: number | undefined, fromNm: number, toNm: number): Promise<number[]> {
  const name = `${edition ?? 'latest'} ${fromNm} ${toNm}`
  const old = kept.get(name)
  if (old && old.until > Date.now()) return old.lines
  const answer = await serverGet<Transition[]>('/transitions', { wavelength_min_nm: fromNm, wavelength_max_nm: toNm, rules: 'rigorous', limit: 1000, edition })
  if (answer === null) return []
  const lines = answer.data.map((line) => Number(line.wavelength_conventional_nm.toFixed(3)))
  if (kept.size > 16) kept.clear()
  kept.set(name, { until: Date.now() + (edition === undefined ? 60_000 : 3_600_000), lines })
  return lines
}
