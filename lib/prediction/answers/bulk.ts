import type { z } from 'zod'
import { G_S } from '@/lib/atomic/constants'
import type { Snapshot } from '@/lib/catalogue/shape'
import { faultsProblem, Problem } from '@/lib/problem'
import { streamedAnswer, wholeAnswer } from '@/lib/prediction/bulk/answer'
import type { MultipletGiven } from '@/lib/prediction/bulk/block'
import type { HeavyJob } from '@/lib/prediction/bulk/heavy'
import type { Pool } from '@/lib/prediction/bulk/pool'
import { componentCount, linePairs } from '@/lib/prediction/bulk/places'
import { planFieldTable } from '@/lib/prediction/bulk/table-request'
import { planPredictions, type PredictionPlan, type PredictionsAsked } from '@/lib/prediction/bulk/request'
import { TABLE_CHECKSUM } from '@/lib/prediction/bulk/table-chunks'
import { FIELD_CONVENTIONS } from '@/lib/prediction/conventions'
import type { Format } from '@/openapi/core/formats'
import type { makeFieldTable } from '@/openapi/operations/field-tables'

/** Who asks for what may be a large computation, and where such are done. */
export interface Asking {
  pool: () => Pool
  caller: string
  signal: AbortSignal
}

type Warn = (code: string, detail: string) => void

/** What is done at once, without a worker: answering it takes some milliseconds at most. */
const SMALL_VALUES = 10_000
const SMALL_LINES = 3

const isSmall = ({ values, lines, options }: PredictionPlan): boolean => values * (1 + Number(options.derivatives) + Number(options.strengths)) <= SMALL_VALUES && lines <= SMALL_LINES

const CONVENTIONS = {
  q: FIELD_CONVENTIONS.q,
  shift: '(E_u(m_u) - E_u) - (E_l(m_l) - E_l), from the line J_l - J_u that the component is named by; a positive shift is to higher wavenumber.',
  order: 'Components by q, m_lower, j_lower, j_upper; J named by continuity from zero field. Matrices are [field][component] in JSON, lists over the fields in Arrow.',
  normalisation: 'line: the strengths of each q sum to 1 at zero field. multiplet: all strengths of a field sum to 1. A multiplet lists the components that only the field induces, in either model.',
  intensity: 'Optically thin emission at theta_deg: strength (of a multiplet three times that) times sin^2(theta)/2 for pi and (1 + cos^2(theta))/4 for each sigma.',
  derivatives: 'Of the values with respect to the field, per tesla; analytic (Hellmann-Feynman).',
  nucleus: 'Hyperfine structure and isotope shifts are not in these positions.',
  g_l: 1,
  air: FIELD_CONVENTIONS.air,
} as const

async function bodyOf(job: HeavyJob, small: boolean, { pool, caller, signal }: Asking) {
  return small ? wholeAnswer(job) : streamedAnswer(pool(), caller, job, signal)
}

/** Components of lines and multiplets over fields: small answers at once, large ones by the pool and streamed. */
export async function predictionsAnswer(snapshot: Snapshot, body: PredictionsAsked, format: Format, warn: Warn, asking: Asking) {
  const plan = await planPredictions(snapshot, body)
  for (const { code, detail } of plan.warnings) warn(code, detail)
  const { blocks, field, fieldText, options } = plan
  const written = format === 'arrow' || format === 'ndjson' ? format : 'json'
  return {
    meta: { model: body.model, g_values: body.g_values, quantity: body.quantity, values: plan.values, conventions: { ...CONVENTIONS, g_s: options.gS ?? G_S } },
    stream: async (meta: Record<string, unknown>) => ({
      name: 'predictions',
      body: await bodyOf({ task: 'predictions', format: written, blocks, field, fieldText, options, meta: JSON.stringify(meta) }, isSmall(plan), asking),
    }),
  }
}

type FieldTableAsked = z.output<NonNullable<(typeof makeFieldTable)['body']>>

/** Whether a table is two nodes of few components; how many nodes a diagonalised one will have is not known before, and the strengths of many lines take long. */
const isSmallTable = ({ model, multiplet }: { model: string; multiplet: MultipletGiven }): boolean =>
  model === 'linear' && 4 * componentCount(multiplet) <= SMALL_VALUES && linePairs(multiplet).length <= SMALL_LINES

/** A multiplet over an interval of fields as nodes and slopes. */
export function fieldTableAnswer(snapshot: Snapshot, body: FieldTableAsked, format: Format, asking: Asking) {
  const { plan, faults } = planFieldTable(snapshot, body)
  if (plan === null) throw faultsProblem(faults)
  return {
    meta: { model: body.model, g_values: body.g_values, conventions: { order: CONVENTIONS.order, q: CONVENTIONS.q, g_l: 1, g_s: body.g_s ?? G_S, nucleus: CONVENTIONS.nucleus, checksum: TABLE_CHECKSUM } },
    stream: async (meta: Record<string, unknown>) => {
      try {
        return { name: 'field-table', body: await bodyOf({ ...plan, format: format === 'arrow' ? 'arrow' : 'json', meta: JSON.stringify(meta) }, isSmallTable(plan), asking) }
      } catch (error) {
        throw error instanceof Error && 'code' in error && error.code === 'table_too_large' ? new Problem('table_too_large', error.message, { errors: [{ pointer: '/max_error_invcm', code: 'table_too_large', detail: error.message }] }) : error
      }
    },
  }
}
