import { rotationTangent } from '@/lib/atomic/rotation'

export interface Eigensystem {
  /** Upwards. */
  values: number[]
  /** vectors[k] belongs to values[k]; orthonormal. */
  vectors: number[][]
}

const MOST_SWEEPS = 60

const at = (matrix: number[][], i: number, j: number): number => matrix[i]?.[j] ?? 0

function offDiagonal(matrix: number[][]): number {
  let sum = 0
  for (let i = 0; i < matrix.length; i += 1) for (let j = 0; j < i; j += 1) sum += at(matrix, i, j) ** 2
  return sum
}

/** Rotates rows and columns p, q of the matrix, and the rows p, q of the vectors, so that the element p q vanishes. */
function rotate(matrix: number[][], vectors: number[][], p: number, q: number): void {
  const [a, b, c] = [at(matrix, p, p), at(matrix, q, q), at(matrix, p, q)]
  const t = rotationTangent(a, b, c)
  if (t === 0) return
  const cosine = 1 / Math.sqrt(1 + t * t)
  const sine = t * cosine
  const [rowP, rowQ, vectorP, vectorQ] = [matrix[p], matrix[q], vectors[p], vectors[q]]
  if (!rowP || !rowQ || !vectorP || !vectorQ) return
  for (let k = 0; k < matrix.length; k += 1) {
    const [vp, vq] = [vectorP[k] ?? 0, vectorQ[k] ?? 0]
    vectorP[k] = cosine * vp - sine * vq
    vectorQ[k] = sine * vp + cosine * vq
    const row = matrix[k]
    if (k === p || k === q || !row) continue
    const [kp, kq] = [row[p] ?? 0, row[q] ?? 0]
    row[p] = rowP[k] = cosine * kp - sine * kq
    row[q] = rowQ[k] = sine * kp + cosine * kq
  }
  rowP[p] = a - t * c
  rowQ[q] = b + t * c
  rowP[q] = rowQ[p] = 0
}

/**
 * Eigenvalues and vectors of a small symmetric matrix by cyclic Jacobi rotations: slow for large matrices, simple, and as exact as the
 * matrix for the few states here. C. G. J. Jacobi, J. reine angew. Math. 30, 51 (1846); H. Rutishauser, Numer. Math. 9, 1 (1966).
 */
export function symmetricEigen(symmetric: readonly (readonly number[])[]): Eigensystem {
  const n = symmetric.length
  const matrix = symmetric.map((row) => [...row])
  const vectors = symmetric.map((_, i) => Array.from({ length: n }, (_unused, j) => (i === j ? 1 : 0)))
  for (let sweep = 0; sweep < MOST_SWEEPS && offDiagonal(matrix) > 0; sweep += 1) {
    for (let p = 0; p < n; p += 1) for (let q = p + 1; q < n; q += 1) rotate(matrix, vectors, p, q)
  }
  const order = vectors.map((_, i) => i).sort((i, j) => at(matrix, i, i) - at(matrix, j, j))
  return { values: order.map((i) => at(matrix, i, i)), vectors: order.map((i) => vectors[i] ?? []) }
}
