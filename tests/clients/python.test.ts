import { spawn } from 'node:child_process'
import { beforeAll, expect, inject, it } from 'vitest'
import { python } from '../support/python.mjs'

let interpreter = ''
beforeAll(async () => {
  interpreter = await python()
}, 600_000)

const run = (args: string[]): Promise<{ code: number | null; text: string }> =>
  new Promise((resolve, reject) => {
    const child = spawn(interpreter, args, { env: { ...process.env, LODETERM_URL: inject('baseUrl'), PYTHONDONTWRITEBYTECODE: '1' } })
    let text = ''
    for (const stream of [child.stdout, child.stderr]) stream.on('data', (piece) => { text += String(piece) })
    child.on('error', reject)
    child.on('close', (code) => resolve({ code, text }))
  })

it('the tests of the Python client hold against the running server, none of them skipped', async () => {
  const { code, text } = await run(['-W', 'error::ResourceWarning', '-m', 'unittest', 'discover', '-v', 'clients/python/tests'])
  expect(code, text).toBe(0)
  expect(text).not.toMatch(/skipped/)
  expect(Number(/Ran (\d+) tests/.exec(text)?.[1])).toBeGreaterThanOrEqual(20)
})

it('the client reads without NumPy, and says what it lacks where it needs it', async () => {
  // None in sys.modules is what Python takes for a module that is not there
  const program = `
import sys
sys.modules["numpy"] = None
sys.path.insert(0, "clients/python")
import os
from lodeterm import Client
table = Client(os.environ["LODETERM_URL"], edition=1)
print(table.level("Na-I.3")["id"])
try:
    table.predict(["Na-I.1~Na-I.3"], field=[1])
except ImportError as error:
    print(error)
`
  const { code, text } = await run(['-c', program])
  expect(code, text).toBe(0)
  expect(text.trim().split('\n')).toEqual(['Na-I.3', 'This needs NumPy (Debian: python3-numpy).'])
})
