import { rotationTangent } from '@/lib/atomic/rotation'

const EPSILON = Number.EPSILON
const MOST_STEPS = 60

/** Two states: one rotation, exact. Vectors as rows, lower energy first. */
function solvePair(d: Float64Array, e: Float64Array, z: Float64Array, at: number): void {
  // plain constants in these loops: taking arrays apart costs more than the arithmetic
  const a = d[0] as number
  const b = d[1] as number
  const c = e[0] as number
  const t = rotationTangent(a, b, c)
  const cosine = 1 / Math.sqrt(1 + t * t)
  const sine = t * cosine
  const first = a - t * c
  const second = b + t * c
  const upright = first <= second
  d[0] = upright ? first : second
  d[1] = upright ? second : first
  const row = upright ? at : at + 2
  const other = upright ? at + 2 : at
  z[row] = cosine
  z[row + 1] = -sine
  z[other] = sine
  z[other + 1] = cosine
}

/** Insertion sort of energies upwards, rows of vectors with them; n is small. */
function sortUpwards(n: number, d: Float64Array, z: Float64Array, at: number): void {
  for (let i = 1; i < n; i += 1) {
    for (let k = i; k > 0 && (d[k - 1] as number) > (d[k] as number); k -= 1) {
      const energy = d[k] as number
      d[k] = d[k - 1] as number
      d[k - 1] = energy
      for (let j = 0; j < n; j += 1) {
        const upper = at + k * n + j
        const lower = upper - n
        const amplitude = z[upper] as number
        z[upper] = z[lower] as number
        z[lower] = amplitude
      }
    }
  }
}

/** One implicit QL sweep over the unreduced part l .. m; rotates the rows of z with it. */
function sweep(l: number, m: number, n: number, d: Float64Array, e: Float64Array, z: Float64Array, at: number): void {
  let shift = ((d[l + 1] as number) - (d[l] as number)) / (2 * (e[l] as number))
  const root = Math.sqrt(shift * shift + 1)
  let g = (d[m] as number) - (d[l] as number) + (e[l] as number) / (shift + (shift < 0 ? -root : root))
  let sine = 1
  let cosine = 1
  let p = 0
  for (let i = m - 1; i >= l; i -= 1) {
    const f = sine * (e[i] as number)
    const b = cosine * (e[i] as number)
    const r = Math.sqrt(f * f + g * g)
    e[i + 1] = r
    if (r === 0) {
      d[i + 1] = (d[i + 1] as number) - p
      e[m] = 0
      return
    }
    sine = f / r
    cosine = g / r
    g = (d[i + 1] as number) - p
    shift = ((d[i] as number) - g) * sine + 2 * cosine * b
    p = sine * shift
    d[i + 1] = g + p
    g = cosine * shift - b
    const low = at + i * n
    const high = low + n
    for (let j = 0; j < n; j += 1) {
      const x = z[low + j] as number
      const y = z[high + j] as number
      z[high + j] = sine * x + cosine * y
      z[low + j] = cosine * x - sine * y
    }
  }
  d[l] = (d[l] as number) - p
  e[l] = g
  e[m] = 0
}

/**
 * Eigenvalues and vectors of a symmetric tridiagonal matrix, in place and without allocation: d (diagonal) becomes the energies upwards,
 * e (n - 1 off-diagonals in an array of at least n) is used up, row k of z (from `at`, n wide) becomes the vector of state k.
 * Implicit QL: A. Dubrulle, R. S. Martin & J. H. Wilkinson, Numer. Math. 12, 377 (1968); two states by one rotation.
 */
export function solveTridiagonal(n: number, d: Float64Array, e: Float64Array, z: Float64Array, at = 0): void {
  if (n === 1) {
    z[at] = 1
    return
  }
  if (n === 2) return solvePair(d, e, z, at)
  for (let i = 0; i < n * n; i += 1) z[at + i] = i % (n + 1) === 0 ? 1 : 0
  e[n - 1] = 0
  for (let l = 0; l < n; l += 1) {
    for (let step = 0; step < MOST_STEPS; step += 1) {
      let m = l
      while (m < n - 1 && Math.abs(e[m] as number) > EPSILON * (Math.abs(d[m] as number) + Math.abs(d[m + 1] as number))) m += 1
      if (m === l) break
      sweep(l, m, n, d, e, z, at)
    }
  }
  sortUpwards(n, d, z, at)
}
