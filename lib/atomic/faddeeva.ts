/** Step of the trapezoidal rule; its error is of the order exp(-pi^2/h^2) = 7e-18. */
const STEP = 0.5
/** Nodes on each side: exp(-(13 h)^2) = 4e-19 is left out. */
const NODES = 13
/** From this |z|^2 on ten terms of the asymptotic series are exact to the last digit. */
const FAR = 150
const TWO_OVER_SQRT_PI = 2 / Math.sqrt(Math.PI)

/** Nodes k h and (k + 1/2) h above zero, with exp(-t^2). */
const nodesFrom = (offset: number): { t: Float64Array; weight: Float64Array } => {
  const t = Float64Array.from({ length: NODES }, (_, k) => (k + offset) * STEP)
  return { t, weight: t.map((value) => Math.exp(-value * value)) }
}
const WHOLE = nodesFrom(1)
const HALF = nodesFrom(0.5)

/** Whether x lies in the outer quarters between whole nodes, so that the half-way nodes keep away from it. */
const nearWhole = (x: number): boolean => {
  const place = x / STEP - Math.floor(x / STEP)
  return place < 0.25 || place >= 0.75
}

/** i/(sqrt(pi) z) (1 + 1/2z^2 + 3/4z^4 + ...): Abramowitz & Stegun 7.1.23. */
function far(x: number, y: number): { real: number; imaginary: number } {
  const square = x * x + y * y
  // u = 1/(2 z^2)
  const ur = (x * x - y * y) / (2 * square * square)
  const ui = (-2 * x * y) / (2 * square * square)
  let sr = 1
  let si = 0
  for (let n = 19; n >= 1; n -= 2) {
    const pr = sr * ur - si * ui
    si = n * (sr * ui + si * ur)
    sr = 1 + n * pr
  }
  const root = Math.sqrt(Math.PI) * square
  // on the real axis the series has no real part; what is left is exp(-x^2)
  return { real: y === 0 ? Math.exp(-x * x) : (y * sr - x * si) / root, imaginary: (x * sr + y * si) / root }
}

/**
 * The Faddeeva function w(z) = exp(-z^2) erfc(-iz) of z = x + iy, y >= 0, by the trapezoidal rule with the residue of the near pole taken out.
 * Whole or half-way nodes, whichever are farther from x, so that nothing cancels: the real part (the Voigt function) is a sum of positive terms
 * and keeps its digits in the far wings. F. Matta & A. Reichel, Math. Comp. 25, 339 (1971); D. B. Hunter & T. Regan, Math. Comp. 26, 539
 * (1972); M. Al Azah & S. N. Chandler-Wilde, SIAM J. Numer. Anal. 59, 2346 (2021).
 */
export function faddeeva(x: number, y: number): { real: number; imaginary: number } {
  if (x * x + y * y > FAR) return far(x, y)
  const half = nearWhole(x)
  const t = half ? HALF.t : WHOLE.t
  const weight = half ? HALF.weight : WHOLE.weight
  let even = 0
  let odd = 0
  if (!half) {
    const square = x * x + y * y
    even = 1 / square
    odd = x / square
  }
  for (let k = 0; k < NODES; k += 1) {
    const node = t[k] as number
    const w = weight[k] as number
    const below = x - node
    const above = x + node
    const low = below * below + y * y
    const high = above * above + y * y
    // one division for both nodes
    const share = w / (low * high)
    even += (low + high) * share
    odd += (below * high + above * low) * share
  }
  const factor = STEP / Math.PI
  const sum = { real: factor * y * even, imaginary: factor * odd }
  return y < Math.PI / STEP ? addResidue(sum, x, y, half) : sum
}

/** 2 exp(-z^2)/(1 -+ exp(-2 pi i z/h)), minus for whole nodes. */
function addResidue(sum: { real: number; imaginary: number }, x: number, y: number, half: boolean): { real: number; imaginary: number } {
  const size = 2 * Math.exp(y * y - x * x)
  if (size === 0) return sum
  const phase = (2 * Math.PI * x) / STEP
  const growth = (half ? 1 : -1) * Math.exp((2 * Math.PI * y) / STEP)
  const [dr, di] = [1 + growth * Math.cos(phase), -growth * Math.sin(phase)]
  const [nr, ni] = [size * Math.cos(2 * x * y), -size * Math.sin(2 * x * y)]
  const square = dr * dr + di * di
  return { real: sum.real + (nr * dr + ni * di) / square, imaginary: sum.imaginary + (ni * dr - nr * di) / square }
}

/** dw/dz = 2i/sqrt(pi) - 2 z w, as real and imaginary part. Abramowitz & Stegun 7.1.20. */
export function faddeevaDerivative(x: number, y: number, w: { real: number; imaginary: number }): { real: number; imaginary: number } {
  return { real: -2 * (x * w.real - y * w.imaginary), imaginary: TWO_OVER_SQRT_PI - 2 * (x * w.imaginary + y * w.real) }
}
