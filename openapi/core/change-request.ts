import type { z } from 'zod'
import { nearest } from '@/lib/problem/nearest'

type Kind = 'level' | 'source' | 'species' | 'isotope' | 'hyperfine'
interface Request {
  kind?: Kind | undefined
  action: 'create' | 'replace' | 'retire'
  species?: string | undefined
  level?: string | undefined
  source?: string | undefined
  mass_number?: number | undefined
  values?: Record<string, unknown> | undefined
  successor?: string | null | undefined
}
type Context = z.core.$RefinementCtx

const MEMBERS = ['species', 'level', 'source', 'mass_number'] as const
const WANTED: Record<Kind, readonly (typeof MEMBERS)[number][]> = { level: ['level'], source: ['source'], species: ['species'], isotope: ['species', 'mass_number'], hyperfine: ['level', 'mass_number'] }

const fault = (context: Context, path: (string | number)[], code: string, message: string): void => void context.addIssue({ code: 'custom', path, message, params: { code } })

function checkSubject(request: Request, kind: Kind, context: Context): void {
  const wanted = kind === 'level' && request.action === 'create' ? (['species'] as const) : WANTED[kind]
  for (const member of MEMBERS) {
    const given = request[member] !== undefined
    const needed = (wanted as readonly string[]).includes(member)
    if (needed && !given) fault(context, [member], 'missing_field', `Needed to say what the change is of: ${wanted.join(' and ')}.`)
    // the species of a level may be said again, where it is the same
    const repeated = member === 'species' && request.level !== undefined && request.level.startsWith(`${request.species ?? ''}.`)
    if (!needed && given && !repeated) fault(context, [member], 'subject_malformed', `A change of this kind names its subject by ${wanted.join(' and ')} alone.`)
  }
}

function checkValues(request: Request, schema: z.ZodObject, context: Context): void {
  if (request.action === 'retire') {
    if (request.values !== undefined) fault(context, ['values'], 'field_not_applicable', 'A retired level has no values: give reason, and successor where there is one.')
    return
  }
  if (request.values === undefined) {
    fault(context, ['values'], 'missing_field', 'The values are needed: all of them, since a change replaces the whole row.')
    return
  }
  const read = schema.safeParse(request.values)
  for (const issue of read.success ? [] : read.error.issues) {
    if (issue.code !== 'unrecognized_keys') context.addIssue({ ...issue, path: ['values', ...issue.path] } as never)
    else {
      for (const key of issue.keys.slice(0, 50)) {
        const near = issue.path.length === 0 ? nearest(key, Object.keys(schema.shape)) : null
        fault(context, ['values', ...(issue.path as (string | number)[]), key], 'unknown_field', `This is no value of such a thing.${near === null ? '' : ` Did you mean ${near}?`}`)
      }
    }
  }
}

/** What the members of a change say together: subject by kind and action, values by kind. */
export function checkRequest(request: Request, values: Record<Kind, z.ZodObject>, context: Context): void {
  const kind = request.kind ?? 'level'
  if (request.action === 'retire' && kind !== 'level') fault(context, ['action'], 'action_impossible', 'Only levels are retired; anything else is corrected with replace.')
  if (request.action !== 'retire' && request.successor !== undefined && request.successor !== null) fault(context, ['successor'], 'field_not_applicable', 'Only a retired level has a successor.')
  checkSubject(request, kind, context)
  checkValues(request, values[kind], context)
}
