/** The request behind a view, as text for three places: a shell, Python's standard library, TypeScript. */
import { apiPath, type ApiQuery } from './data/api'

export interface ShownRequest { path: string; query?: ApiQuery; method?: 'GET' | 'POST'; body?: unknown }
export type RequestLanguage = 'curl' | 'python' | 'typescript'
export const LANGUAGES: readonly { id: RequestLanguage; label: string }[] = [
  { id: 'curl', label: 'curl' },
  { id: 'python', label: 'Python' },
  { id: 'typescript', label: 'TypeScript' },
]

const shellQuote = (text: string): string => `'${text.replace(/'/g, "'\\''")}'`
const isEmpty = (value: unknown): boolean => value === undefined || value === null || value === ''

function pairs(query: ApiQuery = {}): [string, string][] {
  return Object.keys(query).sort().flatMap((name): [string, string][] => {
    const value = query[name]
    if (isEmpty(value)) return []
    return Array.isArray(value) ? value.map((item): [string, string] => [name, item]) : [[name, String(value)]]
  })
}

export function requestText(language: RequestLanguage, origin: string, request: ShownRequest): string {
  const { path, query, method = 'GET', body } = request
  const address = `${origin}${apiPath(path, query)}`
  const json = body === undefined ? null : JSON.stringify(body, null, 2)
  if (language === 'curl') {
    const lines = [`curl -sS ${shellQuote(address)}`]
    if (json !== null) lines[0] = `curl -sS -X ${method} ${shellQuote(address)}`
    if (json !== null) lines.push(`  -H 'Content-Type: application/json'`, `  -d ${shellQuote(json)}`)
    return lines.join(' \\\n')
  }
  if (language === 'python') {
    const given = pairs(query)
    const rows = given.map(([name, value]) => `    (${JSON.stringify(name)}, ${JSON.stringify(value)}),`)
    const start = ['import json', given.length > 0 ? 'from urllib.parse import urlencode' : null, 'from urllib.request import Request, urlopen', '',
      `address = ${JSON.stringify(`${origin}${apiPath(path)}`)}`].filter((line) => line !== null)
    if (given.length > 0) start.push('query = [', ...rows, ']', 'address += "?" + urlencode(query)')
    if (json === null) start.push('request = Request(address, headers={"Accept": "application/json"})')
    else start.push(`body = json.loads(r"""${json}""")`, `request = Request(address, data=json.dumps(body).encode(), method=${JSON.stringify(method)}, headers={"Content-Type": "application/json"})`)
    return [...start, 'with urlopen(request) as answer:', '    answer = json.load(answer)', 'data, meta = answer["data"], answer["meta"]'].join('\n')
  }
  const given = pairs(query)
  const lines = [`const address = new URL(${JSON.stringify(`${origin}${apiPath(path)}`)})`, ...given.map(([name, value]) => `address.searchParams.append(${JSON.stringify(name)}, ${JSON.stringify(value)})`)]
  if (json === null) lines.push(`const response = await fetch(address, { headers: { Accept: 'application/json' } })`)
  else lines.push(`const body = ${json}`, `const response = await fetch(address, {`, `  method: '${method}',`, `  headers: { 'Content-Type': 'application/json' },`, '  body: JSON.stringify(body),', '})')
  return [...lines, 'if (!response.ok) throw new Error((await response.json()).detail)', 'const { data, meta } = await response.json()'].join('\n')
}
