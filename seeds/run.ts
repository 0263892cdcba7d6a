// Fills an empty database: the first edition, and the demo accounts where they are allowed. Prints what a first start has to tell.
import { closeDb, getDb } from '@/db/client'
import { getConfig } from '@/lib/config'
import { printAccounts, setDemoAccounts } from './demo'
import { makeDemoAmendments } from './demo-amendments'
import { loadFirstEdition } from './load'

try {
  const db = getDb()
  const loaded = await loadFirstEdition(db)
  if (loaded !== null) console.error(`loaded edition 1: ${loaded.counts.species} species, ${loaded.counts.levels} levels`)
  const made = await setDemoAccounts(db, getConfig().demo)
  // npm start asks for them; tests begin with an empty dashboard
  if (made !== null && process.env.DEMO_AMENDMENTS === '1') console.error(`made ${await makeDemoAmendments(db)} demo amendments, of invented values`)
  if (made !== null) console.log(`Demo accounts (npm run demo-accounts prints them again):\n${printAccounts(made)}`)
} catch (error) {
  console.error(error instanceof Error ? error.message : error)
  process.exitCode = 1
} finally {
  await closeDb()
}
