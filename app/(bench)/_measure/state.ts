import { readTyped } from './pasted'

export const MOST_LINES = 20
export const MOST_ROWS = 300
const TRANSITION = /^[A-Z][a-z]?-[IVXLC]+\.\d{1,7}~[A-Z][a-z]?-[IVXLC]+\.\d{1,7}$/
export const isTransition = (id: string): boolean => TRANSITION.test(id)

/** How a peak is assigned: `''` found by the fit, `q0` `q1` `q-1` `qs` by polarisation, `g0` `g1` `g-1` a whole group, `c1.-1` a component by twice its m's. */
export type Assignment = string

export interface Row {
  /** As typed, tidied. */
  value: string
  unc: string
  assigned: Assignment
  /** Index of its line. */
  line: number
}

export const QUANTITIES = ['positions', 'separations', 'ring_radii'] as const
export type Quantity = (typeof QUANTITIES)[number]
export const UNITS = ['nm', 'pm', 'cm-1', 'mcm-1', 'GHz', 'MHz'] as const
export type Unit = (typeof UNITS)[number]
export const UNIT_NAME: Record<Unit, string> = { nm: 'nm', pm: 'pm', 'cm-1': 'cm⁻¹', 'mcm-1': '10⁻³ cm⁻¹', GHz: 'GHz', MHz: 'MHz' }
export const isWavelength = (unit: Unit): boolean => unit === 'nm' || unit === 'pm'
export const MODELS = ['auto', 'linear', 'intermediate'] as const
export const MEDIA = ['conventional', 'air', 'vacuum'] as const
export const SCALES = ['exact', 'uncertain', 'free'] as const

export const emptyRow = (line = 0): Row => ({ value: '', unc: '', assigned: '', line })
export const isEmpty = (row: Row): boolean => row.value === '' && row.unc === ''

const cell = (text: string): string => text.replace(/[;,~]/g, '').slice(0, 40)

/** Rows as they stand in the address: `16972.735,0.006,c1.-1;16973.49,0.002`, with the line last where it is not the first. */
export function writeRows(rows: readonly Row[]): string {
  const last = rows.findLastIndex((row) => !isEmpty(row) || row.assigned !== '')
  return rows
    .slice(0, last + 1)
    .map((row) => [cell(row.value), cell(row.unc), row.assigned, row.line === 0 ? '' : String(row.line)].join(',').replace(/,+$/, ''))
    .join(';')
}

const ASSIGNMENT = /^(?:q(?:-?[0-2]|s)|g-?[0-2]|c-?\d{1,3}\.-?\d{1,3})$/

export function readRows(text: string): Row[] {
  if (text === '') return []
  return text.split(';').slice(0, MOST_ROWS).map((part) => {
    const [value = '', unc = '', assigned = '', line = '0'] = part.split(',')
    return { value: value.slice(0, 40), unc: unc.slice(0, 40), assigned: ASSIGNMENT.test(assigned) ? assigned : '', line: /^\d{1,2}$/.test(line) ? Number(line) : 0 }
  })
}

/** Everything that the page sends, as the address keeps it. */
export interface Measured {
  lines: readonly string[]
  rows: readonly Row[]
  quantity: Quantity
  unit: Unit
  medium: (typeof MEDIA)[number]
  shared: boolean
  scale: (typeof SCALES)[number]
  scaleUnc: string
  model: (typeof MODELS)[number]
  thetaDeg: number | null
  /** The free spectral range in cm^-1, the step of radius squared and its deviation, as typed. */
  range: string
  step: string
  stepUnc: string
  unknown: 'field' | 'g'
  field: string
  fieldUnc: string
  freeG: 'lower' | 'upper' | 'both'
  edition: number | undefined
}

/** Members of a measurement that its assignment makes. */
function assignment(assigned: Assignment): Record<string, unknown> {
  if (assigned === 'qs') return { q: 'sigma' }
  if (assigned.startsWith('q')) return { q: Number(assigned.slice(1)) }
  if (assigned.startsWith('g')) return { group: Number(assigned.slice(1)) }
  const component = /^c(-?\d+)\.(-?\d+)$/.exec(assigned)
  return component ? { m_lower: Number(component[1]) / 2, m_upper: Number(component[2]) / 2 } : {}
}

export interface FitBody {
  /** What the API is asked; null while there is nothing to ask. */
  body: Record<string, unknown> | null
  /** Place in `rows` of each measurement sent. */
  places: number[]
  /** Rows with something typed that is no number yet: by place. */
  unread: number[]
}

/** The request behind the page. Rows that are empty, or no number yet, are left out. */
export function fitBody(measured: Measured): FitBody {
  const { rows, lines, quantity, unit } = measured
  const rings = quantity === 'ring_radii'
  const places: number[] = []
  const unread: number[] = []
  const measurements = rows.flatMap((row, place) => {
    const position = readTyped(row.value)
    const unc = row.unc === '' ? undefined : readTyped(row.unc)
    if (position === null || unc === null) {
      if (!isEmpty(row)) unread.push(place)
      return []
    }
    places.push(place)
    return [{ ...(row.line === 0 ? {} : { line: row.line }), position, ...(unc === undefined ? {} : { position_unc: unc }), ...assignment(row.assigned) }]
  })
  const range = readTyped(measured.range)
  const step = readTyped(measured.step)
  if (lines.length === 0 || measurements.length === 0 || (rings && (range === null || step === null)) || (measured.unknown === 'g' && measured.field === '')) return { body: null, places, unread }
  const scaleUnc = readTyped(measured.scaleUnc)
  const stepUnc = readTyped(measured.stepUnc)
  return {
    places,
    unread,
    body: {
      ...(measured.edition === undefined ? {} : { edition: measured.edition }),
      mode: 'positions',
      ...(measured.unknown === 'g' ? { unknown: 'g', field: measured.field, ...(measured.fieldUnc === '' ? {} : { field_unc: measured.fieldUnc }), free_g: measured.freeG } : {}),
      lines: lines.map((transition) => ({ transition, ...(measured.shared && lines.length > 1 && !rings ? { zero: 'shared' } : {}) })),
      quantity,
      ...(rings ? { etalon: { free_spectral_range_invcm: range, square_step: step, ...(stepUnc === null ? {} : { square_step_unc: stepUnc }) } } : { unit }),
      ...(!rings && isWavelength(unit) && measured.medium !== 'conventional' ? { medium: measured.medium } : {}),
      measurements,
      ...(measured.scale === 'free' ? { scale: { free: true } } : measured.scale === 'uncertain' && scaleUnc !== null ? { scale: { unc: scaleUnc } } : {}),
      ...(measured.unknown === 'g' || measured.model === 'auto' ? {} : { model: measured.model }),
      ...(measured.thetaDeg === null ? {} : { theta_deg: measured.thetaDeg }),
    },
  }
}
