import { type HyperfineBlock, type HyperfineReady, hyperfineSublevels, MU_B_OVER_H_MHZ_PER_T, VANISHING_TESLA } from '@/lib/atomic/hyperfine'
import { rotationTangent } from '@/lib/atomic/rotation'
import { solveTridiagonal } from '@/lib/atomic/tridiagonal'

const MOST_SWEEPS = 60

/** One Jacobi rotation of rows and columns p, q of a flat symmetric matrix and of the rows of z. */
function rotateFlat(n: number, a: Float64Array, z: Float64Array, p: number, q: number): void {
  const c = a[p * n + q] as number
  if (c === 0) return
  const t = rotationTangent(a[p * n + p] as number, a[q * n + q] as number, c)
  const cosine = 1 / Math.sqrt(1 + t * t)
  const sine = t * cosine
  for (let k = 0; k < n; k += 1) {
    const vp = z[p * n + k] as number
    const vq = z[q * n + k] as number
    z[p * n + k] = cosine * vp - sine * vq
    z[q * n + k] = sine * vp + cosine * vq
    if (k === p || k === q) continue
    const kp = a[k * n + p] as number
    const kq = a[k * n + q] as number
    const next = cosine * kp - sine * kq
    const other = sine * kp + cosine * kq
    a[k * n + p] = next
    a[p * n + k] = next
    a[k * n + q] = other
    a[q * n + k] = other
  }
  a[p * n + p] = (a[p * n + p] as number) - t * c
  a[q * n + q] = (a[q * n + q] as number) + t * c
  a[p * n + q] = 0
  a[q * n + p] = 0
}

/** `symmetricEigen` without allocation: a is used up, d becomes the values upwards, rows of z the vectors. */
export function solveSymmetric(n: number, a: Float64Array, d: Float64Array, z: Float64Array): void {
  for (let i = 0; i < n * n; i += 1) z[i] = i % (n + 1) === 0 ? 1 : 0
  for (let sweep = 0; sweep < MOST_SWEEPS; sweep += 1) {
    let left = 0
    for (let p = 0; p < n; p += 1) for (let q = p + 1; q < n; q += 1) left += Math.abs(a[p * n + q] as number)
    if (left === 0) break
    for (let p = 0; p < n; p += 1) for (let q = p + 1; q < n; q += 1) rotateFlat(n, a, z, p, q)
  }
  for (let i = 0; i < n; i += 1) d[i] = a[i * n + i] as number
  for (let i = 1; i < n; i += 1) {
    for (let k = i; k > 0 && (d[k - 1] as number) > (d[k] as number); k -= 1) {
      const value = d[k] as number
      d[k] = d[k - 1] as number
      d[k - 1] = value
      for (let j = 0; j < n; j += 1) {
        const amplitude = z[k * n + j] as number
        z[k * n + j] = z[(k - 1) * n + j] as number
        z[(k - 1) * n + j] = amplitude
      }
    }
  }
}

interface FlatBlock {
  n: number
  zero: Float64Array
  slopes: Float64Array
  /** Without a quadrupole the matrix is tridiagonal in m_J. */
  tridiagonal: boolean
}

const flatBlock = (block: HyperfineBlock): FlatBlock => ({
  n: block.twoMJs.length,
  zero: Float64Array.from(block.zero.flat()),
  slopes: Float64Array.from(block.slopes),
  tridiagonal: block.zero.every((row, i) => row.every((element, j) => Math.abs(i - j) < 2 || element === 0)),
})

/** Energies into d, vectors into rows of z, at x = mu_B B/h in MHz. */
function solveFlat(block: FlatBlock, x: number, room: { a: Float64Array; d: Float64Array; e: Float64Array; z: Float64Array }): void {
  const { n, zero, slopes } = block
  const { a, d, e, z } = room
  if (!block.tridiagonal) {
    a.set(zero)
    for (let i = 0; i < n; i += 1) a[i * n + i] = (zero[i * n + i] as number) + x * (slopes[i] as number)
    return solveSymmetric(n, a, d, z)
  }
  for (let i = 0; i < n; i += 1) {
    d[i] = (zero[i * n + i] as number) + x * (slopes[i] as number)
    e[i] = i + 1 < n ? (zero[i * n + i + 1] as number) : 0
  }
  solveTridiagonal(n, d, e, z)
}

/** `hyperfineSublevels`, its specification, over a grid of fields (T): flat [field][state] arrays of energies (MHz) and derivatives (MHz/T). */
export function hyperfineGrid(ready: HyperfineReady, fieldsTesla: ArrayLike<number>): { states: number; energiesMhz: Float64Array; derivatives: Float64Array } {
  const states = (ready.level.twoJ + 1) * (ready.level.twoI + 1)
  const energiesMhz = new Float64Array(states * fieldsTesla.length)
  const derivatives = new Float64Array(states * fieldsTesla.length)
  const blocks = ready.blocks.map(flatBlock)
  const widest = Math.max(...blocks.map((block) => block.n))
  const room = { a: new Float64Array(widest * widest), d: new Float64Array(widest), e: new Float64Array(widest), z: new Float64Array(widest * widest) }
  let at = 0
  for (let row = 0; row < fieldsTesla.length; row += 1) {
    const field = fieldsTesla[row] as number
    if (Math.abs(field) < VANISHING_TESLA) {
      for (const state of hyperfineSublevels(ready, field)) {
        energiesMhz[at] = state.energyMhz
        derivatives[at] = state.derivativeMhzPerTesla
        at += 1
      }
      continue
    }
    for (const block of blocks) {
      solveFlat(block, MU_B_OVER_H_MHZ_PER_T * field, room)
      for (let k = 0; k < block.n; k += 1) {
        let slope = 0
        for (let j = 0; j < block.n; j += 1) slope += (block.slopes[j] as number) * (room.z[k * block.n + j] as number) ** 2
        energiesMhz[at] = room.d[k] as number
        derivatives[at] = MU_B_OVER_H_MHZ_PER_T * slope
        at += 1
      }
    }
  }
  return { states, energiesMhz, derivatives }
}
