import { problemOf, type ProblemDocument } from './data/api'

const SAFE = 'Nothing in the table was changed.'

/** What a reader can do about each kind of refusal. */
function advice(problem: ProblemDocument): string {
  if (problem.code === 'edition_unknown') return 'Let the edition in the address go, or choose one of those published.'
  if (problem.code === 'invitation_unusable') return 'Ask the admin who invited you for a new invitation.'
  if (problem.code === 'reset_unusable') return 'Ask for a new link on the page of forgotten passwords.'
  switch (problem.status) {
    case 0: return 'Check the connection and whether the server is running, then try again.'
    case 400: return 'Correct what is named below and ask again.'
    case 401: return 'Sign in, or use a key that is still valid.'
    case 403: return 'Ask someone whose role allows it, or use a key with that role.'
    case 404: return 'Check the spelling of the identifier, or look for it from Find.'
    case 409: return 'Read the present state again, then repeat the step from there.'
    case 410: return 'Follow the successor where one is named, or read an older edition.'
    case 412: return 'Someone changed it meanwhile. Load it again; what you typed is still here.'
    case 422: return 'The request is well formed but physics forbids it; the rule is named below.'
    case 429: return 'Too many requests in a short time. Wait a moment, then try again.'
    default: return problem.status >= 500 ? 'This is a fault of the server. Try again; if it stays, send the request id to whoever runs it.' : 'Go back and try another way.'
  }
}

const placeOf = (error: { parameter?: string; pointer?: string }): string | null => error.parameter ?? error.pointer ?? null

/** A problem document for people: what happened, what is safe, what to try. */
export function ProblemView({ error, problem, onRetry, heading = 'h2' }: {
  error?: unknown; problem?: ProblemDocument; onRetry?: () => void; heading?: 'h1' | 'h2' | 'h3'
}) {
  const shown = problem ?? problemOf(error)
  const Heading = heading
  // One fault that only repeats the sentence above is not told twice.
  const faults = (shown.errors ?? []).filter((item, _, all) => all.length > 1 || item.detail !== shown.detail)
  const mayHelp = shown.status === 0 || shown.status === 429 || shown.status >= 500
  const page = (() => {
    try {
      return new URL(shown.type, 'http://local').pathname
    } catch {
      return null
    }
  })()
  return (
    <div role="alert" className="border border-l-[3px] border-rule border-l-bad bg-sheet p-5">
      <Heading className="text-xl">{shown.title}</Heading>
      <dl className="facts mt-3">
        <dt>What happened</dt>
        <dd>
          {shown.detail}
          {faults.length > 0 ? (
            <ul className="mt-1.5 list-disc space-y-1 pl-5">
              {faults.map((item, index) => (
                <li key={index}>
                  {placeOf(item) ? <code className="mr-1.5 text-lamp-ink">{placeOf(item)}</code> : null}
                  {item.detail}
                </li>
              ))}
            </ul>
          ) : null}
        </dd>
        <dt>What is safe</dt>
        <dd>{SAFE}</dd>
        <dt>What to try</dt>
        <dd>{advice(shown)}</dd>
      </dl>
      <div className="mt-4 flex flex-wrap items-center gap-3">
        {onRetry && mayHelp ? <button type="button" className="btn" onClick={onRetry}>Try again</button> : null}
        {page?.startsWith('/problems/') ? <a className="link text-sm" href={page}>More about this problem</a> : null}
        {shown.instance ? <span className="note">Request id <code>{shown.instance}</code></span> : null}
      </div>
    </div>
  )
}
