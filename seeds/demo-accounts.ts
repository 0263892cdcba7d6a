// npm run demo-accounts: prints the demo accounts with their passwords.
import { closeDb, getDb } from '@/db/client'
import { getConfig } from '@/lib/config'
import { demoAccounts, demoFile, printAccounts } from './demo'

try {
  const { accounts, renewed } = await demoAccounts(getDb())
  if (accounts.length === 0) {
    console.error('There are no demo accounts: they are made at the first start on loopback (or with DEMO=1), when there are no other accounts.')
    process.exitCode = 1
  } else {
    if (renewed) console.error(`${demoFile()} was lost or told of other accounts; these are new passwords.`)
    if (!getConfig().demo) console.error('They are closed: this instance is not on loopback and DEMO=1 is not set.')
    console.log(printAccounts(accounts))
  }
} finally {
  await closeDb()
}
