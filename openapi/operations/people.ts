import { ACCOUNT_OPERATIONS } from './accounts'
import { changePassword, createKey, getKey, getMe, listKeys, revokeKey, signIn, signOut } from './account'
import { AMENDMENT_OPERATIONS } from './amendments'
import { getLive, getOpenApi, getReady, listAudit } from './instance'
import { NOTICE_OPERATIONS } from './notices'

/** Everything about accounts, drafts and the instance itself. */
export const PEOPLE_OPERATIONS = [
  signIn, signOut, getMe, changePassword, listKeys, createKey, getKey, revokeKey, ...ACCOUNT_OPERATIONS, ...NOTICE_OPERATIONS,
  ...AMENDMENT_OPERATIONS, listAudit, getLive, getReady, getOpenApi,
]
