import { getDb } from '@/db/client'
import { callerFor } from '@/lib/access/authenticate'
import { idempotencyStore } from '@/lib/access/idempotency'
import { sessionSecret } from '@/lib/access/secret'
import { shared } from '@/lib/access/shared'
import { CONSTANTS_EDITION, PHYSICS_VERSION } from '@/lib/atomic/constants'
import { editionExists, getSnapshot, latestEdition, type Snapshot } from '@/lib/catalogue/snapshot'
import { getConfig } from '@/lib/config'
import { createEndpoint } from '@/lib/http/endpoint'
import type { House } from '@/lib/http/house'
import { KeptAnswers } from '@/lib/http/kept-answers'
import { processLog } from '@/lib/http/log'
import { RateLimiter } from '@/lib/http/rate-limit'
import { writeTable } from '@/lib/http/writers'

/** Where the house is put together: the one place that knows every room. Made at the first request, not at import. */
function build(): House<Snapshot> {
  const config = getConfig()
  return {
    baseUrl: config.baseUrl,
    openReading: config.openReading,
    ratePerMinute: { anonymous: config.rateAnonymousPerMinute, known: config.rateKeyPerMinute },
    trustedProxies: config.trustedProxies,
    constants: CONSTANTS_EDITION,
    physics: PHYSICS_VERSION,
    secret: sessionSecret,
    editions: { latest: latestEdition, exists: editionExists },
    snapshotFor: getSnapshot,
    callerFor,
    idempotency: idempotencyStore(getDb),
    limiter: shared('limiter', () => new RateLimiter()),
    // while the code is being changed under a running server, answers are made anew
    kept: config.nodeEnv === 'production' ? shared('kept', () => new KeptAnswers()) : undefined,
    writeTable,
    log: processLog(config.logLevel),
  }
}

let house: House<Snapshot> | undefined
export const { endpoint, resource } = createEndpoint<Snapshot>(() => (house ??= build()))
