import { MU_B_OVER_H_GHZ_PER_T } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import { coupledRange, magneticNumbers, type TwoJ } from '@/lib/atomic/half'
import { type Eigensystem, symmetricEigen } from '@/lib/atomic/jacobi'

export const MU_B_OVER_H_MHZ_PER_T = MU_B_OVER_H_GHZ_PER_T * 1000

/** A fine-structure level and its nucleus. */
export interface HyperfineLevel {
  twoJ: TwoJ
  /** null only for J = 0. */
  gJ: number | null
  twoI: TwoJ
  /** Magnetic dipole constant, MHz. */
  aMhz: number
  /** Electric quadrupole constant, MHz; null is taken as 0, and it is dropped where I or J is under 1. */
  bMhz: number | null
  /** g_I' in units of mu_B, negative for a positive nuclear moment; null is taken as 0. */
  gI: number | null
}

/** The states of one m_F in |m_J, m_I>, by m_J upwards. Energies in MHz. */
export interface HyperfineBlock {
  twoMF: TwoJ
  twoMJs: TwoJ[]
  /** A I.J and the quadrupole, MHz. */
  zero: number[][]
  /** g_J m_J + g_I' m_I. */
  slopes: number[]
  /** F of the k-th state upwards by continuity, its zero-field energy, and whether another F of this block coincides with it. */
  fs: { twoF: TwoJ; energyMhz: number; coincides: boolean }[]
  /** High-field name of the k-th state: the k-th lowest g_J m_J + g_I' m_I. */
  pairs: { twoMJ: TwoJ; twoMI: TwoJ }[]
}

export interface HyperfineReady {
  level: HyperfineLevel
  blocks: HyperfineBlock[]
}

export interface HyperfineState {
  twoMF: TwoJ
  /** Counted upwards from 1 among the states of one m_F. */
  k: number
  /** F by continuity from B -> 0+; null where zero-field energies coincide. */
  twoF: TwoJ | null
  /** The F that `shiftMhz` is counted from. */
  nominalTwoF: TwoJ
  /** High-field name. */
  twoMJ: TwoJ
  twoMI: TwoJ
  /** From the centre of gravity of the level J. */
  energyMhz: number
  /** From the hyperfine level F at zero field. */
  shiftMhz: number
  derivativeMhzPerTesla: number
  /** d^2E/dB^2, by second-order perturbation. */
  curvatureMhzPerTesla2: number
  amplitudes: { twoMJ: TwoJ; twoMI: TwoJ; amplitude: number }[]
}

export const HYPERFINE_CONVENTIONS = {
  energy_origin: 'centre of gravity of the fine-structure level without hyperfine structure and field; shift_mhz is counted from the level F at zero field',
  detuning_origin: 'the line between the centres of gravity of both fine-structure levels, without hyperfine structure and field',
  left_out: 'octupole and higher constants, and mixing with other J by the hyperfine interaction or the field',
} as const

const hasQuadrupole = ({ twoJ, twoI }: HyperfineLevel): boolean => twoJ >= 2 && twoI >= 2

/** Factor that turns 3(I.J)^2 + 3/2 I.J - I(I+1)J(J+1) into energy: B / [2I(2I-1) J(2J-1)]; 0 where there is no quadrupole. */
function quadrupoleFactor(level: HyperfineLevel): number {
  if (!hasQuadrupole(level)) return 0
  const [i, j] = [level.twoI / 2, level.twoJ / 2]
  return (level.bMhz ?? 0) / (2 * i * (2 * i - 1) * j * (2 * j - 1))
}

const product = (two: TwoJ): number => (two * (two + 2)) / 4

/**
 * Energy of F at zero field, MHz: A K/2 + B [3/4 K(K+1) - I(I+1)J(J+1)] / [2I(2I-1)J(2J-1)], K = F(F+1) - I(I+1) - J(J+1).
 * H. B. G. Casimir, On the Interaction between Atomic Nuclei and Electrons (1936); Woodgate, ch. 9.
 */
export function hyperfineEnergy(level: HyperfineLevel, twoF: TwoJ): number {
  const [jj, ii] = [product(level.twoJ), product(level.twoI)]
  const k = product(twoF) - ii - jj
  return (level.aMhz * k) / 2 + quadrupoleFactor(level) * (0.75 * k * (k + 1) - ii * jj)
}

/** I.J = I_z J_z + (I_+ J_- + I_- J_+)/2 within one m_F. */
function scalarProduct(level: HyperfineLevel, twoMF: TwoJ, twoMJs: TwoJ[]): number[][] {
  const raising = (two: TwoJ, twoM: TwoJ) => Math.sqrt(product(two) - (twoM * (twoM + 2)) / 4)
  return twoMJs.map((a) =>
    twoMJs.map((b) => {
      if (a === b) return (a * (twoMF - a)) / 4
      if (Math.abs(a - b) !== 2) return 0
      const low = Math.min(a, b)
      // J_+ takes m_J up from the lower one while I_- takes m_I down to that of the higher
      return (raising(level.twoJ, low) * raising(level.twoI, twoMF - low - 2)) / 2
    }),
  )
}

function zeroFieldMatrix(level: HyperfineLevel, twoMF: TwoJ, twoMJs: TwoJ[]): number[][] {
  const ij = scalarProduct(level, twoMF, twoMJs)
  const [factor, constant] = [quadrupoleFactor(level), product(level.twoI) * product(level.twoJ)]
  return ij.map((row, a) =>
    row.map((element, b) => {
      if (factor === 0) return level.aMhz * element
      const square = row.reduce((sum, part, c) => sum + part * (ij[c]?.[b] ?? 0), 0)
      return level.aMhz * element + factor * (3 * square + 1.5 * element - (a === b ? constant : 0))
    }),
  )
}

/** Two zero-field energies nearer than this share of the constants are one: Casimir's formula rounds them apart. */
const COINCIDING = 1e-12

const scaleOf = (level: HyperfineLevel): number => Math.max(Math.abs(level.aMhz), Math.abs(level.bMhz ?? 0), Number.MIN_VALUE) * (level.twoI + 1) * (level.twoJ + 1)

function blockOf(level: HyperfineLevel, twoMF: TwoJ): HyperfineBlock {
  const twoMJs = magneticNumbers(level.twoJ).filter((twoMJ) => Math.abs(twoMF - twoMJ) <= level.twoI)
  const [gJ, gI] = [level.gJ ?? 0, level.gI ?? 0]
  const slopeOf = (twoMJ: TwoJ) => (gJ * twoMJ + gI * (twoMF - twoMJ)) / 2
  const fs = coupledRange(level.twoJ, level.twoI)
    .filter((twoF) => twoF >= Math.abs(twoMF))
    .map((twoF) => ({ twoF, energyMhz: hyperfineEnergy(level, twoF) }))
  const near = (a: number, b: number) => Math.abs(a - b) <= COINCIDING * scaleOf(level)
  return {
    twoMF,
    twoMJs,
    zero: zeroFieldMatrix(level, twoMF, twoMJs),
    slopes: twoMJs.map(slopeOf),
    fs: fs
      .map((one) => ({ ...one, coincides: fs.some((other) => other !== one && near(other.energyMhz, one.energyMhz)) }))
      .sort((a, b) => (near(a.energyMhz, b.energyMhz) ? a.twoF - b.twoF : a.energyMhz - b.energyMhz)),
    pairs: [...twoMJs].sort((a, b) => slopeOf(a) - slopeOf(b)).map((twoMJ) => ({ twoMJ, twoMI: twoMF - twoMJ })),
  }
}

/** Makes a level with its nucleus ready for fields. Throws `g_unknown` where a g_J is needed and is not given. */
export function hyperfineLevel(level: HyperfineLevel): HyperfineReady {
  if (level.twoJ > 0 && level.gJ === null) throw new PhysicsError('g_unknown', 'This level has no g_J in its coupling and none is measured, so its splitting cannot be computed.', 'level')
  const highest = level.twoJ + level.twoI
  return { level, blocks: magneticNumbers(highest).map((twoMF) => blockOf(level, twoMF)) }
}

const bilinear = (slopes: number[], left: number[], right: number[]): number => slopes.reduce((sum, slope, i) => sum + slope * (left[i] ?? 0) * (right[i] ?? 0), 0)

/** At B -> 0+ the states of F; within coinciding F those that the field chooses. */
function limitAtZero(block: HyperfineBlock, width: number): Eigensystem {
  const { values, vectors } = symmetricEigen(block.zero)
  const chosen: number[][] = []
  for (let first = 0; first < values.length; ) {
    let last = first
    while (last + 1 < values.length && (values[last + 1] ?? 0) - (values[first] ?? 0) <= width) last += 1
    const group = vectors.slice(first, last + 1)
    const within = symmetricEigen(group.map((a) => group.map((b) => bilinear(block.slopes, a, b))))
    for (const mix of within.vectors) chosen.push(block.twoMJs.map((_, i) => mix.reduce((sum, share, n) => sum + share * (group[n]?.[i] ?? 0), 0)))
    first = last + 1
  }
  return { values, vectors: chosen }
}

/** As `VANISHING_X` of LS terms, in tesla: squares of smaller fields underflow. */
export const VANISHING_TESLA = 1e-100

/** The states of one m_F at a field (T), upwards. */
export function hyperfineBlockStates(ready: HyperfineReady, block: HyperfineBlock, fieldTesla: number): HyperfineState[] {
  const muB = MU_B_OVER_H_MHZ_PER_T
  const x = muB * fieldTesla
  const { values, vectors } =
    Math.abs(fieldTesla) < VANISHING_TESLA
      ? limitAtZero(block, 100 * COINCIDING * scaleOf(ready.level))
      : symmetricEigen(block.zero.map((row, i) => row.map((element, j) => (i === j ? element + x * (block.slopes[i] ?? 0) : element))))
  return values.map((energyMhz, k) => {
    const [f, pair, vector] = [block.fs[k], block.pairs[k], vectors[k] ?? []]
    let curvature = 0
    vectors.forEach((other, p) => {
      const gap = energyMhz - (values[p] ?? 0)
      if (p !== k && gap !== 0) curvature += (2 * (muB * bilinear(block.slopes, vector, other)) ** 2) / gap
    })
    return {
      twoMF: block.twoMF,
      k: k + 1,
      twoF: f === undefined || f.coincides ? null : f.twoF,
      nominalTwoF: f?.twoF ?? 0,
      twoMJ: pair?.twoMJ ?? 0,
      twoMI: pair?.twoMI ?? 0,
      energyMhz,
      shiftMhz: fieldTesla === 0 ? 0 : energyMhz - (f?.energyMhz ?? 0),
      derivativeMhzPerTesla: muB * bilinear(block.slopes, vector, vector),
      curvatureMhzPerTesla2: curvature,
      amplitudes: block.twoMJs.map((twoMJ, i) => ({ twoMJ, twoMI: block.twoMF - twoMJ, amplitude: vector[i] ?? 0 })),
    }
  })
}

/**
 * All hyperfine sublevels of a level in a field (T), by m_F and then upwards, from H = A I.J + quadrupole + mu_B B (g_J J_z + g_I' I_z)
 * diagonalised in |m_J, m_I>. The k-th state of an m_F takes the k-th lowest F >= |m_F| at B -> 0+ and, at high field, the k-th lowest
 * g_J m_J + g_I' m_I. G. Breit & I. I. Rabi, Phys. Rev. 38, 2082 (1931); Arimondo, Inguscio & Violino, Rev. Mod. Phys. 49, 31 (1977).
 */
export function hyperfineSublevels(ready: HyperfineReady, fieldTesla: number): HyperfineState[] {
  return ready.blocks.flatMap((block) => hyperfineBlockStates(ready, block, fieldTesla))
}
