/** How long and how often to wait for a server that is busy. */
export interface Patience {
  /** Requests in all, the first one included. */
  attempts: number
  /** No single wait is longer, in milliseconds; a server that asks for more ends the attempt. */
  longestWaitMs: number
  /** First wait where the server names none, in milliseconds; it doubles. */
  firstWaitMs: number
}

export const PATIENCE: Patience = { attempts: 6, longestWaitMs: 70_000, firstWaitMs: 250 }

/** What a Retry-After field asks for, in milliseconds: seconds or a date (RFC 9110, 10.2.3); undefined where there is none. */
export function retryAfterMs(field: string | null, now = Date.now()): number | undefined {
  if (field === null) return undefined
  if (/^\d+$/.test(field.trim())) return Number(field) * 1000
  const at = Date.parse(field)
  return Number.isNaN(at) ? undefined : Math.max(0, at - now)
}

/** Waits; rejects at once when the signal says so. */
export function pause(ms: number, signal?: AbortSignal): Promise<void> {
  return new Promise((resolve, reject) => {
    if (signal?.aborted === true) return reject(signal.reason as Error)
    const stop = (): void => {
      clearTimeout(timer)
      reject(signal?.reason as Error)
    }
    const timer = setTimeout(() => {
      signal?.removeEventListener('abort', stop)
      resolve()
    }, ms)
    signal?.addEventListener('abort', stop, { once: true })
  })
}

/**
 * Asks until an answer comes that is not "later". 429 is asked again whatever was asked, since nothing was done; 503, 502, 504 and a broken
 * connection only where the request is `safe`. A little chance keeps many clients from coming back at once.
 */
export async function withPatience(ask: () => Promise<Response>, safe: boolean, patience: Patience, signal?: AbortSignal): Promise<Response> {
  for (let attempt = 1; ; attempt += 1) {
    const usual = patience.firstWaitMs * 2 ** (attempt - 1) * (0.75 + Math.random() / 2)
    let wait: number
    try {
      const response = await ask()
      const later = response.status === 429 || (safe && [502, 503, 504].includes(response.status))
      if (!later || attempt >= patience.attempts) return response
      wait = retryAfterMs(response.headers.get('retry-after')) ?? usual
      if (wait > patience.longestWaitMs) return response
      await response.body?.cancel()
    } catch (error) {
      // fetch throws TypeError where no answer came; anything else, an abort above all, is not the network's
      if (!(error instanceof TypeError) || !safe || attempt >= patience.attempts) throw error
      wait = Math.min(usual, patience.longestWaitMs)
    }
    await pause(wait, signal)
  }
}
