import { PhysicsError } from '@/lib/atomic/errors'
import { isProblemCode, Problem } from '@/lib/problem'
import { databaseDown, isDatabaseDown } from '@/lib/http/unexpected'

/** Whatever was thrown, as a Problem: itself, impossible physics (422), a database that is away (503), or a fault of ours (500). */
export function asProblem(error: unknown): Problem {
  if (error instanceof Problem) return error
  if (error instanceof PhysicsError) {
    const faults = error.field === undefined ? [] : [{ parameter: error.field, code: error.code, detail: error.detail }]
    return new Problem(isProblemCode(error.code) ? error.code : 'physics_impossible', error.detail, { errors: faults })
  }
  if (isDatabaseDown(error)) return databaseDown(error)
  return new Problem('internal', 'Something failed that should not; it has been written to the log under this request id.', { cause: error })
}

/** RFC 9457. `type` is the page that explains the code, `instance` the request's id. */
export function problemDocument(problem: Problem, baseUrl: string, requestId: string): Record<string, unknown> {
  return {
    type: `${baseUrl}/problems/${problem.code}`,
    title: problem.title,
    status: problem.status,
    detail: problem.detail,
    instance: requestId,
    code: problem.code,
    ...(problem.errors.length === 0 ? {} : { errors: problem.errors }),
    ...problem.extra,
  }
}
