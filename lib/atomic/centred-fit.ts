/**
 * Weighted least squares where each datum has one free additive zero (several data may share one) beside a few further parameters. The zeros are
 * taken out by centring each group, so that positions of 2e4 with deviations of 1e-3 lose no digits. Linear models are solved in one step.
 */
export interface CentredProblem {
  measured: Float64Array
  /** 1/sigma^2. */
  weights: Float64Array
  /** Which zero each datum has. */
  zeroOf: Int32Array
  zeros: number
  /** Parameters beside the zeros. */
  parameters: number
  /** What is known of parameters beforehand, as one standard deviation. */
  priors: { parameter: number; value: number; unc: number }[]
  /** Fills values, and derivatives [parameter][datum], at theta. */
  model(theta: readonly number[], values: Float64Array, derivatives: Float64Array[]): void
}

export interface CentredSolution {
  theta: number[]
  zeros: number[]
  /** (A^T W A)^-1 in the order zeros, parameters. */
  covariance: number[][]
  chiSquared: number
  /** Measured minus fitted. */
  residuals: number[]
  /** Share of its own measurement in the fitted value of each datum. */
  leverage: number[]
  /** Centred derivatives, for what else moves the parameters. */
  centred: Float64Array[]
  iterations: number
  converged: boolean
}

export type CentredOutcome = { ok: true; solution: CentredSolution } | { ok: false; /** The parameter that the data do not fix, alone or beside the others before it. */ parameter: number; alone: boolean }

/** Subtracts from each datum the weighted mean of its group; returns the means. */
export function centre({ weights, zeroOf, zeros }: CentredProblem, values: Float64Array): number[] {
  const first = new Float64Array(zeros).fill(Number.NaN)
  for (let i = 0; i < values.length; i += 1) if (Number.isNaN(first[zeroOf[i] as number] as number)) first[zeroOf[i] as number] = values[i] as number
  const [sums, whole] = [new Float64Array(zeros), new Float64Array(zeros)]
  for (let i = 0; i < values.length; i += 1) {
    const z = zeroOf[i] as number
    sums[z] = (sums[z] as number) + (weights[i] as number) * ((values[i] as number) - (first[z] as number))
    whole[z] = (whole[z] as number) + (weights[i] as number)
  }
  const means = [...first].map((value, z) => value + (sums[z] as number) / (whole[z] as number))
  // first the reference is taken off, then the small mean of what is left
  for (let i = 0; i < values.length; i += 1) {
    const z = zeroOf[i] as number
    values[i] = (values[i] as number) - (first[z] as number) - (sums[z] as number) / (whole[z] as number)
  }
  return means
}

const dot = (weights: Float64Array, a: Float64Array, b: Float64Array): number => {
  let sum = 0
  for (let i = 0; i < a.length; i += 1) sum += (weights[i] as number) * (a[i] as number) * (b[i] as number)
  return sum
}

/** Inverse of a symmetric positive matrix with unit diagonal by Cholesky; the index of the pivot that vanishes where it is singular. */
function invert(matrix: number[][]): number[][] | number {
  const n = matrix.length
  const l = matrix.map((row) => row.map(() => 0))
  const at = (m: number[][], i: number, j: number): number => m[i]?.[j] ?? 0
  for (let i = 0; i < n; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      let sum = at(matrix, i, j)
      for (let k = 0; k < j; k += 1) sum -= at(l, i, k) * at(l, j, k)
      if (i === j && sum <= SINGULAR) return i
      ;(l[i] as number[])[j] = i === j ? Math.sqrt(sum) : sum / at(l, j, j)
    }
  }
  const columns = matrix.map((_, c) => {
    const y: number[] = []
    for (let i = 0; i < n; i += 1) y[i] = ((i === c ? 1 : 0) - y.reduce((sum, value, k) => sum + at(l, i, k) * value, 0)) / at(l, i, i)
    const x: number[] = Array.from({ length: n }, () => 0)
    for (let i = n - 1; i >= 0; i -= 1) x[i] = ((y[i] ?? 0) - x.reduce((sum, value, k) => (k > i ? sum + at(l, k, i) * value : sum), 0)) / at(l, i, i)
    return x
  })
  return matrix.map((_, i) => columns.map((column) => column[i] ?? 0))
}

/** Columns that agree to this share of their squared length are one; a centred column this small beside the plain one is nothing. */
const SINGULAR = 1e-12
const CENTRED_AWAY = 1e-20

interface Linearised {
  chiSquared: number
  values: Float64Array
  residuals: Float64Array
  centred: Float64Array[]
  matrix: number[][]
  gradient: number[]
  /** Squared lengths before centring. */
  plain: number[]
}

function linearise(problem: CentredProblem, target: Float64Array, theta: readonly number[]): Linearised {
  const { weights, parameters, priors } = problem
  const values = new Float64Array(target.length)
  const centred = Array.from({ length: parameters }, () => new Float64Array(target.length))
  problem.model(theta, values, centred)
  const plain = centred.map((column) => dot(weights, column, column))
  for (const column of centred) centre(problem, column)
  const fitted = Float64Array.from(values)
  centre(problem, fitted)
  const residuals = target.map((value, i) => value - (fitted[i] as number))
  const matrix = centred.map((a) => centred.map((b) => dot(weights, a, b)))
  const gradient = centred.map((column) => dot(weights, column, residuals))
  let chiSquared = dot(weights, residuals, residuals)
  for (const { parameter, value, unc } of priors) {
    const off = value - (theta[parameter] ?? 0)
    chiSquared += (off / unc) ** 2
    ;(matrix[parameter] as number[])[parameter] = (matrix[parameter]?.[parameter] ?? 0) + 1 / (unc * unc)
    gradient[parameter] = (gradient[parameter] ?? 0) + off / (unc * unc)
  }
  return { chiSquared, values, residuals, centred, matrix, gradient, plain }
}

/** Inverse of the normal matrix, its diagonal raised by (1 + damping), with columns scaled to unit length; or what is not determined. */
function normalInverse({ matrix, plain }: Linearised, damping: number): number[][] | { parameter: number; alone: boolean } {
  const scales = matrix.map((row, i) => Math.sqrt(row[i] ?? 0))
  const nothing = scales.findIndex((scale, i) => scale * scale <= CENTRED_AWAY * (plain[i] ?? 0) || scale === 0)
  if (nothing >= 0) return { parameter: nothing, alone: true }
  const scaled = matrix.map((row, i) => row.map((value, j) => (i === j ? 1 + damping : value / ((scales[i] ?? 1) * (scales[j] ?? 1)))))
  const inverse = invert(scaled)
  if (typeof inverse === 'number') return { parameter: inverse, alone: false }
  return inverse.map((row, i) => row.map((value, j) => value / ((scales[i] ?? 1) * (scales[j] ?? 1))))
}

const times = (matrix: number[][], vector: readonly number[]): number[] => matrix.map((row) => row.reduce((sum, value, j) => sum + value * (vector[j] ?? 0), 0))

const MOST_ITERATIONS = 100
/** A step of this share of a parameter's deviation is none. */
const SETTLED = 1e-8
const MOST_STILL = 12

function finish(problem: CentredProblem, theta: number[], at: Linearised, inverse: number[][], iterations: number, converged: boolean): CentredSolution {
  const { measured, weights, zeroOf, zeros } = problem
  const whole = new Float64Array(zeros)
  for (let i = 0; i < measured.length; i += 1) whole[zeroOf[i] as number] = (whole[zeroOf[i] as number] as number) + (weights[i] as number)
  const columns = Array.from({ length: problem.parameters }, () => new Float64Array(measured.length))
  problem.model(theta, new Float64Array(measured.length), columns)
  const means = columns.map((column) => centre(problem, column))
  const meanOf = (z: number) => means.map((mean) => mean[z] ?? 0)
  const zeroRow = (z: number) => times(inverse, meanOf(z)).map((value) => -value)
  const offsets = measured.map((value, i) => value - (at.values[i] as number))
  const covariance: number[][] = []
  for (let z = 0; z < zeros; z += 1) {
    const row = zeroRow(z)
    const toZeros = Array.from({ length: zeros }, (_, other) => meanOf(other).reduce((sum, mean, p) => sum - mean * (row[p] ?? 0), 0) + (other === z ? 1 / (whole[z] as number) : 0))
    covariance.push([...toZeros, ...row])
  }
  inverse.forEach((row, p) => covariance.push([...Array.from({ length: zeros }, (_, z) => zeroRow(z)[p] ?? 0), ...row]))
  const leverage = [...measured].map((_, i) => {
    const derivative = at.centred.map((column) => column[i] as number)
    const own = times(inverse, derivative).reduce((sum, value, p) => sum + value * (derivative[p] ?? 0), 0)
    return (weights[i] as number) * (1 / (whole[zeroOf[i] as number] as number) + own)
  })
  return { theta, zeros: centre(problem, offsets), covariance, chiSquared: at.chiSquared, residuals: [...at.residuals], leverage, centred: at.centred, iterations, converged }
}

/**
 * Levenberg-Marquardt on the centred problem: K. Levenberg, Q. Appl. Math. 2, 164 (1944); D. W. Marquardt, J. SIAM 11, 431 (1963). Begins
 * without damping, so that a linear model is solved by its normal equations at once. Where the data do not fix a parameter it says which.
 */
export function solveCentred(problem: CentredProblem, start: readonly number[]): CentredOutcome {
  const target = Float64Array.from(problem.measured)
  centre(problem, target)
  let theta = [...start]
  let at = linearise(problem, target, theta)
  let [damping, converged, iterations, still] = [0, false, 0, 0]
  for (; iterations < MOST_ITERATIONS && !converged; iterations += 1) {
    const inverse = normalInverse(at, damping)
    if (!Array.isArray(inverse)) return { ok: false, ...inverse }
    const step = times(inverse, at.gradient)
    const next = theta.map((value, p) => value + (step[p] ?? 0))
    const there = linearise(problem, target, next)
    const scatter = Math.min(1, Math.sqrt(at.chiSquared / target.length))
    const settled = step.every((value, p) => Math.abs(value) <= SETTLED * scatter * Math.sqrt(inverse[p]?.[p] ?? 0) + 1e-13 * Math.abs(next[p] ?? 0) + Number.MIN_VALUE)
    // near the minimum chi-squared changes by rounding only: such steps are taken, a few of them
    const level = Math.abs(there.chiSquared - at.chiSquared) <= 1e-12 * (at.chiSquared + Number.MIN_VALUE)
    still = level ? still + 1 : 0
    if (there.chiSquared <= at.chiSquared || level) {
      theta = next
      at = there
      damping = damping < 1e-7 ? 0 : damping / 10
      converged = settled || still >= MOST_STILL
    } else if (settled) converged = true
    else damping = Math.max(damping * 10, 1e-3)
    if (damping > 1e12) break
  }
  const inverse = normalInverse(at, 0)
  if (!Array.isArray(inverse)) return { ok: false, ...inverse }
  return { ok: true, solution: finish(problem, theta, at, inverse, iterations, converged) }
}
