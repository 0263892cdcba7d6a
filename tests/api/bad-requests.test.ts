import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { ask, type Sending } from './helpers/client'
import { document, type Documented, documented, type ParameterDoc } from './helpers/conformance'
import { forgetAttempts, makeKey, makePerson, SAME_SITE, signIn } from './helpers/people'
import { addressOf, type Baseline, baselineOf, sendingOf } from './helpers/requests'

type Schema = Record<string, unknown>

let admin = ''
let session = ''
beforeAll(async () => {
  admin = (await makeKey('admin')).key
  session = await signIn(await makePerson('admin'))
})

afterAll(forgetAttempts)

/** Credentials that an operation takes. */
const credentials = ({ operation }: Documented): Sending =>
  operation['x-role'] === 'public' ? {} : operation.security.some((one) => 'key' in one) ? { key: admin } : { cookie: session }

const withCredentials = (one: Documented, sending: Sending): Sending => {
  const own = credentials(one)
  return { ...sending, ...own, headers: { ...(own.cookie === undefined ? {} : SAME_SITE), ...sending.headers } }
}

/** Texts that a parameter cannot mean, by its schema. */
function wrongTexts(schema: Schema): string[] {
  const item = (schema.items as Schema | undefined) ?? schema
  const texts = ['a\u0000b']
  if (item.type === 'number' || item.type === 'integer') texts.push('seven', '', 'NaN', 'Infinity', '1e999', '0x10', '1,5')
  if (typeof item.minimum === 'number') texts.push(String(item.minimum - 1))
  if (typeof item.maximum === 'number') texts.push(String(item.maximum + 1))
  if (item.type === 'integer') texts.push('1.5')
  if (item.type === 'boolean') texts.push('maybe', 'TRUE')
  if (Array.isArray(item.enum) && item.type !== 'boolean') texts.push('no_such_word', '')
  if (typeof item.maxLength === 'number') texts.push('x'.repeat(item.maxLength + 1))
  if (typeof item.pattern === 'string') texts.push('\u2603 not of that form')
  return texts
}

const replaced = (query: Baseline['query'], name: string, texts: readonly string[]): Baseline['query'] => [...query.filter(([other]) => other !== name), ...texts.map((text): [string, string] => [name, text])]

/** Must be refused, always as a problem of the 400s; where a parameter is at fault, as one that names it. */
async function refused(one: Documented, baseline: Baseline, why: string, sending: Sending = sendingOf(baseline), parameter?: string): Promise<void> {
  const reply = await ask(one.method, addressOf(one.path, baseline), withCredentials(one, sending))
  if (parameter !== undefined) {
    expect(reply.status, `${why}: ${reply.text.slice(0, 300)}`).toBeOneOf([400, 422])
    expect(reply.json.errors?.map((fault: { parameter?: string }) => fault.parameter), why).toContain(parameter)
  }
  expect(reply.status, `${why}: ${reply.text.slice(0, 300)}`).toBeGreaterThanOrEqual(400)
  expect(reply.status, `${why}: ${reply.text.slice(0, 300)}`).toBeLessThan(500)
}

describe.each(documented)('$method $path', (one) => {
  const baseline = baselineOf(one)
  const parameters = (one.operation.parameters ?? []).filter((parameter: ParameterDoc) => parameter.in === 'query')

  it('refuses unknown and repeated parameters', async () => {
    await refused(one, { ...baseline, query: [...baseline.query, ['surely_unknown', '1']] }, 'unknown parameter', undefined, 'surely_unknown')
    for (const parameter of parameters) {
      if (parameter.schema.type === 'array') continue
      const given = baseline.query.find(([name]) => name === parameter.name)?.[1] ?? String(parameter.schema.default ?? parameter.schema.example ?? '1')
      await refused(one, { ...baseline, query: replaced(baseline.query, parameter.name, [given, given]) }, `${parameter.name} twice`, undefined, parameter.name)
    }
  })

  it('refuses each parameter with each value it cannot have', async () => {
    for (const parameter of parameters) {
      for (const text of wrongTexts(parameter.schema)) {
        await refused(one, { ...baseline, query: replaced(baseline.query, parameter.name, [text]) }, `${parameter.name}=${JSON.stringify(text.slice(0, 40))}`, undefined, parameter.name)
      }
      if (parameter.required === true) await refused(one, { ...baseline, query: replaced(baseline.query, parameter.name, []) }, `${parameter.name} left out`)
    }
    for (const name of Object.keys(baseline.path)) {
      for (const text of ['no such thing', '\u2603', 'a\u0000b', 'x'.repeat(2000), '-1', '..%2f', '\'; drop table levels']) await refused(one, { ...baseline, path: { ...baseline.path, [name]: text } }, `${name}=${text.slice(0, 40)}`)
    }
  })
})

const WRONG_VALUES: unknown[] = [null, true, 'x', '', -1, 0.7, 1e308, [], {}, [[]], 'a\u0000b', 'y'.repeat(20_000), ['x'], { x: 1 }]

/** Every place in a value, root included. */
function* places(value: unknown, at: (string | number)[] = []): Generator<(string | number)[]> {
  yield at
  if (Array.isArray(value)) for (const [index, item] of value.entries()) yield* places(item, [...at, index])
  else if (typeof value === 'object' && value !== null) for (const [name, item] of Object.entries(value)) yield* places(item, [...at, name])
}

function withValue(whole: unknown, at: readonly (string | number)[], value: unknown): unknown {
  const [head, ...rest] = at
  if (head === undefined) return value
  const copy = (Array.isArray(whole) ? [...(whole as unknown[])] : { ...(whole as object) }) as Record<string | number, unknown>
  copy[head] = withValue(copy[head], rest, value)
  return copy
}

function without(whole: unknown, at: readonly (string | number)[]): unknown {
  const last = at.at(-1)
  if (last === undefined) return {}
  const parent = at.slice(0, -1).reduce<unknown>((inside, part) => (inside as Record<string | number, unknown>)[part], whole)
  const fewer = Array.isArray(parent) ? parent.filter((_, index) => index !== last) : Object.fromEntries(Object.entries(parent as object).filter(([name]) => name !== last))
  return withValue(whole, at.slice(0, -1), fewer)
}

const resolve = (schema: Schema): Schema => (typeof schema.$ref === 'string' ? (document.components.schemas[schema.$ref.split('/').at(-1) ?? ''] as Schema) : schema)

describe.each(documented.filter((one) => one.operation.requestBody?.content['application/json'] !== undefined))('the body of $method $path', (one) => {
  const baseline = baselineOf(one)
  const json = { ...baseline.headers, 'content-type': 'application/json' }

  it('refuses what is not JSON, not an object, of another type, or too large', async () => {
    for (const raw of ['', '{', '{"a":1,}', 'null', '[]', '"x"', '7', '{"a":NaN}', '\ufeff{}', '[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[', '{"__proto__":{"x":1}}', '{"constructor":1}']) await refused(one, baseline, raw, { raw, headers: json })
    await refused(one, baseline, 'not UTF-8', { raw: Buffer.from([0x7b, 0xff, 0xfe, 0x7d]), headers: json })
    await refused(one, baseline, 'form', { raw: 'a=1', headers: { ...baseline.headers, 'content-type': 'application/x-www-form-urlencoded' } })
    await refused(one, baseline, 'large', { raw: JSON.stringify({ x: 'a'.repeat(1_100_000) }), headers: json })
  })

  it('refuses a missing required key and an unknown one', async () => {
    await refused(one, { ...baseline, body: { ...(baseline.body as object), surely_unknown: 1 } }, 'unknown key')
    const schema = resolve(one.operation.requestBody?.content['application/json']?.schema as Schema)
    for (const name of (schema.required as string[] | undefined) ?? []) await refused(one, { ...baseline, body: without(baseline.body, [name]) }, `${name} left out`)
  })

  it('never fails, whatever stands at whichever place', async () => {
    for (const at of places(baseline.body)) {
      const bodies = WRONG_VALUES.map((value) => withValue(baseline.body, at, value))
      if (at.length > 0) bodies.push(without(baseline.body, at))
      for (const body of bodies) {
        const reply = await ask(one.method, addressOf(one.path, baseline), withCredentials(one, { headers: baseline.headers, body }))
        expect(reply.status, `${JSON.stringify(at)}: ${JSON.stringify(body).slice(0, 200)} -> ${reply.text.slice(0, 200)}`).toBeLessThan(500)
      }
    }
  })
})

describe.each(documented.filter((one) => one.operation.requestBody?.content['multipart/form-data'] !== undefined))('the form of $method $path', (one) => {
  const baseline = baselineOf(one)
  const boundary = { ...baseline.headers, 'content-type': 'multipart/form-data; boundary=x' }
  const file = 'Content-Disposition: form-data; name="file"; filename="a.csv"'

  it('refuses what is no form, is cut short, too large, or has no boundary', async () => {
    for (const raw of ['', '{}', '--x', '--x--', '--x\r\n\r\n--x--', `--x\r\n${file}`, `--x\r\n${file}\r\n\r\nabc`, `--x\r\nno field\r\n\r\na\r\n--x--`, `--y\r\n${file}\r\n\r\na\r\n--y--`]) await refused(one, baseline, raw, { raw, headers: boundary })
    for (const type of ['multipart/form-data', 'multipart/mixed; boundary=x', 'application/json', 'text/csv']) await refused(one, baseline, type, { raw: '--x--', headers: { ...baseline.headers, 'content-type': type } })
    await refused(one, baseline, 'large', { raw: Buffer.alloc(70 * 1_048_576, 'a'), headers: boundary })
  })

  it('refuses unknown and repeated parts, and parts that cannot mean anything', async () => {
    await refused(one, { ...baseline, form: { ...baseline.form, surely_unknown: '1' } }, 'unknown part')
    for (const name of Object.keys((resolve(one.operation.requestBody?.content['multipart/form-data']?.schema as Schema).properties ?? {}) as object).filter((key) => key !== 'file')) {
      for (const text of ['a\u0000b', '\u2603', 'x'.repeat(300_000), '{"a":', '[]', '{"a":1}']) {
        const { raw, headers } = sendingOf({ ...baseline, form: { ...baseline.form, [name]: text } })
        const reply = await ask(one.method, addressOf(one.path, baseline), withCredentials(one, { raw, headers }))
        expect(reply.status, `${name}=${text.slice(0, 40)}`).toBeLessThan(500)
      }
    }
  })

  it('never fails, whatever the file holds', async () => {
    for (const content of ['', '\u0000', '"', '\ufeff', ',,,\n,,', 'id\n"', `${'a,'.repeat(5000)}\n1`, '__proto__,constructor\n1,2', '\ud800']) {
      const reply = await ask(one.method, addressOf(one.path, baseline), withCredentials(one, sendingOf({ ...baseline, form: { ...baseline.form, file: content } })))
      expect(reply.status, JSON.stringify(content.slice(0, 40))).toBeLessThan(500)
    }
  })
})
