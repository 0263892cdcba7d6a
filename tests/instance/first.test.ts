import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { type Instance, startInstance } from '../support/instance'

let instance: Instance
beforeAll(async () => {
  instance = await startInstance('first')
})
afterAll(() => instance.end())

describe('a table of its own', () => {
  it('is seeded, and knows its demo accounts', async () => {
    expect((await instance.get('/editions/1')).json.data.counts.levels).toBe(407)
    const admin = await instance.signIn('admin')
    expect((await instance.get('/me', admin)).json.data.role).toBe('admin')
  })

  it('comes back after its server was killed', async () => {
    await instance.kill()
    await instance.start()
    expect((await instance.get('/health/ready')).status).toBe(200)
  })
})
