export * from './api'
export * from './client'
export * from './problem'
export { PATIENCE, type Patience, retryAfterMs } from './retry'
