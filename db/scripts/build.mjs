// Builds when the sources have changed; called under the build lock (see steps.mjs).
import { buildNow, endWithChildren, main } from './steps.mjs'

endWithChildren()
await main(buildNow)
