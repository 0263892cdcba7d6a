import type { LineModel } from '@/lib/atomic/field-fit-model'

/** Nodes of a decade of field: neighbours 15 % apart, between which a cubic errs by some 1e-5 of a shift where terms cross over. */
const PER_DECADE = 16
const LEAST_TESLA = 1e-6
const MOST_TESLA = 2e4

interface Node {
  shifts: Float64Array
  slopes: Float64Array
  strengths: Float64Array
  strengthSlopes: Float64Array
}

const copyOf = ({ shifts, slopes, strengths, strengthSlopes }: Node): Node => ({ shifts: shifts.slice(), slopes: slopes.slice(), strengths: strengths.slice(), strengthSlopes: strengthSlopes.slice() })

/**
 * A model read off cubics between nodes that are solved once (Hermite: values and slopes at both ends), for the many fields that a search for the
 * right reading of the peaks tries. What is found with it is fitted with the model itself.
 */
export function tabulatedModel(model: LineModel): LineModel {
  const nodes = new Map<number, Node>()
  const nodeAt = (key: number, fieldTesla: number): Node => {
    const known = nodes.get(key)
    if (known) return known
    model.at(fieldTesla)
    const made = copyOf(model)
    nodes.set(key, made)
    return made
  }
  const room = copyOf(model)
  const take = (from: Node) => {
    room.shifts.set(from.shifts)
    room.slopes.set(from.slopes)
    room.strengths.set(from.strengths)
    room.strengthSlopes.set(from.strengthSlopes)
  }
  return {
    ...model,
    ...room,
    at(fieldTesla) {
      const size = Math.abs(fieldTesla)
      if (!(size >= LEAST_TESLA && size <= MOST_TESLA)) {
        model.at(fieldTesla)
        take(model)
        return
      }
      const k = Math.floor(PER_DECADE * Math.log10(size))
      const sign = fieldTesla < 0 ? -1 : 1
      const [from, to] = [sign * 10 ** (k / PER_DECADE), sign * 10 ** ((k + 1) / PER_DECADE)]
      // keys of both signs are kept apart: no key is as low as the offset
      const offset = sign < 0 ? 1e6 : 0
      const [a, b] = [nodeAt(k + offset, from), nodeAt(k + 1 + offset, to)]
      const h = to - from
      const t = (fieldTesla - from) / h
      const s = 1 - t
      // Hermite's basis and its derivative: (1 + 2t) s^2, t s^2, t^2 (3 - 2t), -t^2 s
      const [p0, m0, p1, m1] = [(1 + 2 * t) * s * s, h * t * s * s, t * t * (3 - 2 * t), -h * t * t * s]
      const [q0, n0, n1] = [(-6 * t * s) / h, s * (1 - 3 * t), t * (3 * t - 2)]
      for (let i = 0; i < room.shifts.length; i += 1) {
        const [ya, yb, da, db] = [a.shifts[i] as number, b.shifts[i] as number, a.slopes[i] as number, b.slopes[i] as number]
        room.shifts[i] = p0 * ya + m0 * da + p1 * yb + m1 * db
        room.slopes[i] = q0 * (ya - yb) + n0 * da + n1 * db
        room.strengths[i] = p0 * (a.strengths[i] as number) + m0 * (a.strengthSlopes[i] as number) + p1 * (b.strengths[i] as number) + m1 * (b.strengthSlopes[i] as number)
      }
    },
  }
}
