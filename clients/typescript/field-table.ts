import type { FieldTable } from './api'
import { BrokenAnswerError } from './problem'

/** A multiplet at one field, by interpolation. */
export interface Interpolated {
  /** Wavenumbers, cm^-1. */
  positions: Float64Array
  /** Their slopes, cm^-1 per tesla. */
  slopes: Float64Array
  /** All of them sum to 1; null without an LS amplitude. */
  strengths: Float64Array | null
}

const hex = (bytes: Uint8Array): string => [...bytes].map((byte) => byte.toString(16).padStart(2, '0')).join('')

/** Throws BrokenAnswerError where a table is not what its checksum says: SHA-256 over its numbers as little-endian float64. */
export async function verifyFieldTable(table: FieldTable): Promise<void> {
  const numbers = [
    table.q, table.m_lower, table.m_upper, table.nodes_tesla,
    ...[table.positions_invcm, table.position_slopes_invcm_per_tesla, table.strengths, table.strength_slopes_per_tesla].map((rows) => rows?.flat() ?? []),
  ].flat()
  const view = new DataView(new ArrayBuffer(8 * numbers.length))
  for (const [i, number] of numbers.entries()) view.setFloat64(8 * i, number, true)
  const found = hex(new Uint8Array(await crypto.subtle.digest('SHA-256', view.buffer)))
  if (found !== table.checksum_sha256) throw new BrokenAnswerError(`The field table has the checksum ${found} and says ${table.checksum_sha256}: it is damaged.`)
}

/** Last node at or below a field, so that there is one above it. */
function intervalOf(nodes: readonly number[], field: number): number {
  let [low, high] = [0, nodes.length - 2]
  while (low < high) {
    const middle = (low + high + 1) >> 1
    if ((nodes[middle] as number) <= field) low = middle
    else high = middle - 1
  }
  return low
}

/**
 * Positions, slopes and strengths at a field in tesla, by cubic Hermite interpolation, within max_error_invcm of the model. Throws RangeError
 * outside the table.
 */
export function interpolate(table: FieldTable, fieldTesla: number): Interpolated {
  const { nodes_tesla: nodes } = table
  const [first, last] = [nodes[0] as number, nodes.at(-1) as number]
  if (!(fieldTesla >= first && fieldTesla <= last)) throw new RangeError(`${fieldTesla} T is outside the table, which runs from ${first} to ${last} T.`)
  const i = intervalOf(nodes, fieldTesla)
  const [a, b] = [nodes[i] as number, nodes[i + 1] as number]
  const h = b - a
  const t = (fieldTesla - a) / h
  const value = (rows: readonly number[][], slopes: readonly number[][]): Float64Array =>
    Float64Array.from(rows[i] ?? [], (v, c) => v + ((rows[i + 1]?.[c] ?? Number.NaN) - v) * t * t * (3 - 2 * t) + h * t * (1 - t) * ((1 - t) * (slopes[i]?.[c] ?? Number.NaN) - t * (slopes[i + 1]?.[c] ?? Number.NaN)))
  const slope = (rows: readonly number[][], slopes: readonly number[][]): Float64Array =>
    Float64Array.from(rows[i] ?? [], (v, c) => (6 * t * (1 - t) * ((rows[i + 1]?.[c] ?? Number.NaN) - v)) / h + (1 - t) * (1 - 3 * t) * (slopes[i]?.[c] ?? Number.NaN) + t * (3 * t - 2) * (slopes[i + 1]?.[c] ?? Number.NaN))
  const { strengths, strength_slopes_per_tesla: strengthSlopes } = table
  return {
    positions: value(table.positions_invcm, table.position_slopes_invcm_per_tesla),
    slopes: slope(table.positions_invcm, table.position_slopes_invcm_per_tesla),
    strengths: strengths === null || strengthSlopes === null ? null : value(strengths, strengthSlopes),
  }
}
