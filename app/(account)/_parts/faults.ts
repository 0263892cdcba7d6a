import { ApiError, type ProblemDocument } from '../../_components/data/api'

/** What the API said is wrong with one body field, if it did. */
export function faultOf(error: unknown, pointer: string): string | undefined {
  if (!(error instanceof ApiError)) return undefined
  return error.problem.errors?.find((fault) => fault.pointer === pointer)?.detail
}

/** The refusal itself, where it is not already told beside a field. */
export function restOf(error: unknown, pointers: readonly string[]): ProblemDocument | null {
  if (error === null || error === undefined) return null
  if (!(error instanceof ApiError)) return { type: 'about:blank', title: 'It did not work', status: 0, detail: 'Something failed in this page.' }
  const { errors = [] } = error.problem
  const told = errors.length > 0 && errors.every((fault) => fault.pointer !== undefined && pointers.includes(fault.pointer))
  return told ? null : error.problem
}
