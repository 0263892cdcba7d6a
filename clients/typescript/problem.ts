import type { Fault, Problem } from './api'

const placeOf = (fault: Fault): string => fault.parameter ?? fault.pointer ?? ''

/** An answer that refuses: an RFC 9457 problem document. The message names everything that is wrong, each with its place. */
export class ProblemError extends Error {
  override name = 'ProblemError'
  readonly status: number
  readonly code: string
  readonly detail: string
  /** All faults of the request, each with the parameter or the JSON pointer it is about. */
  readonly errors: readonly Fault[]
  /** Identifier of the request, for whoever runs the server. */
  readonly requestId: string | null
  readonly problem: Problem | null

  constructor(status: number, problem: Problem | null, said: string, requestId: string | null) {
    const errors = problem?.errors ?? []
    const listed = errors.map((fault) => `\n  ${placeOf(fault)}: ${fault.detail} (${fault.code})`).join('')
    super(`${status} ${problem?.title ?? 'no problem document'}: ${problem?.detail ?? said}${listed}`)
    this.status = status
    this.code = problem?.code ?? ''
    this.detail = problem?.detail ?? said
    this.errors = errors
    this.requestId = problem?.instance ?? requestId
    this.problem = problem
  }

  static async of(response: Response): Promise<ProblemError> {
    const text = await response.text().catch(() => '')
    let problem: Problem | null = null
    if ((response.headers.get('content-type') ?? '').startsWith('application/problem+json')) {
      try {
        problem = JSON.parse(text) as Problem
      } catch { /* a proxy cut it: its text is told instead */ }
    }
    return new ProblemError(response.status, problem, text.slice(0, 300), response.headers.get('x-request-id'))
  }
}

/** What came is not what the API promises: a cut stream, a page of another edition, a checksum that differs. */
export class BrokenAnswerError extends Error {
  override name = 'BrokenAnswerError'
}
