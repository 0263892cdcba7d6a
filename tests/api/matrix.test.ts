import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { ask } from './helpers/client'
import { documented, type OperationDoc } from './helpers/conformance'
import { makeKey, makePerson, type Role, ROLES, SAME_SITE, signIn } from './helpers/people'
import { addressOf, baselineOf, sendingOf } from './helpers/requests'

type Caller = 'stranger' | `${Role}'s key` | `${Role}'s session`
const CALLERS: Caller[] = ['stranger', ...ROLES.map((role) => `${role}'s key` as const), ...ROLES.map((role) => `${role}'s session` as const)]
const RANK: Record<Role, number> = { reader: 1, curator: 2, admin: 3 }
const REFUSALS = ['credentials_missing', 'role_insufficient', 'session_required']

/** What the document promises a caller; the demo's open reading is on. */
function promised(operation: OperationDoc, caller: Caller): string | null {
  const role = operation['x-role']
  if (role === 'public') return null
  if (caller === 'stranger') return role === 'reader' ? null : 'credentials_missing'
  const [own, by] = caller.split('\'s ') as [Role, 'key' | 'session']
  if (by === 'key' && !operation.security.some((one) => 'key' in one)) return 'session_required'
  const needed = role === 'account' ? 'reader' : role
  return RANK[own] >= RANK[needed] ? null : 'role_insufficient'
}

const keys = new Map<Role, string>()
beforeAll(async () => {
  for (const role of ROLES) keys.set(role, (await makeKey(role)).key)
})
afterAll(() => keys.clear())

describe.each(documented)('$method $path', (one) => {
  it.each(CALLERS)('for a %s', async (caller) => {
    const { operation, method, path } = one
    const baseline = baselineOf(one)
    const sending = sendingOf(baseline)
    const [role, by] = caller === 'stranger' ? [null, null] : (caller.split('\'s ') as [Role, 'key' | 'session'])
    if (role !== null && by === 'key') sending.key = keys.get(role)
    // a session of its own for each, since some of the operations end it
    if (role !== null && by === 'session') Object.assign(sending, { cookie: await signIn(await makePerson(role)), headers: { ...sending.headers, ...SAME_SITE } })
    const reply = await ask(method, addressOf(path, baseline), sending)
    const refusal = promised(operation, caller)
    if (refusal === null) expect(REFUSALS, reply.text.slice(0, 300)).not.toContain(reply.json?.code)
    else expect([reply.status, reply.json.code]).toEqual([refusal === 'credentials_missing' ? 401 : 403, refusal])
    expect(reply.status).toBeLessThan(500)
  })
})

describe('every operation', () => {
  it('answers an example of its own well, or by naming what does not exist', async () => {
    for (const one of documented) {
      if (one.operation['x-role'] !== 'reader') continue
      const baseline = baselineOf(one)
      const reply = await ask(one.method, addressOf(one.path, baseline), { ...sendingOf(baseline), key: keys.get('admin') ?? (await makeKey('admin')).key })
      expect(reply.status, `${one.operation.operationId}: ${reply.text.slice(0, 300)}`).toBe(200)
    }
  })
})
