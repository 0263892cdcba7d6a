import fs from 'node:fs'
import path from 'node:path'
import { expect, it } from 'vitest'

const root = path.resolve(import.meta.dirname, '../..')
const ROOMS = ['app', 'db', 'lib', 'openapi', 'seeds']

const files = (folder: string): string[] =>
  fs.readdirSync(folder, { withFileTypes: true }).flatMap((entry) => {
    const at = path.join(folder, entry.name)
    return entry.isDirectory() ? files(at) : /\.tsx?$/.test(entry.name) && !entry.name.endsWith('.d.ts') ? [at] : []
  })

/** Files that a file loads when it runs: type-only imports are gone by then and make no circle. */
function loads(file: string): string[] {
  const text = fs.readFileSync(file, 'utf8')
  const names = [...text.matchAll(/^(?:import|export)\s+(?!type\b)(?:[^'"]*?\sfrom\s+)?'([^']+)'/gm)].map((match) => match[1] ?? '')
  return names.flatMap((name) => {
    const base = name.startsWith('@/') ? path.join(root, name.slice(2)) : name.startsWith('.') ? path.resolve(path.dirname(file), name) : null
    if (base === null) return []
    const found = ['', '.ts', '.tsx', '/index.ts', '/index.tsx'].map((ending) => base + ending).find((at) => fs.existsSync(at) && fs.statSync(at).isFile())
    return found === undefined ? [] : [found]
  })
}

/** The first circle met going down from each file, as a path of file names; empty where there is none. */
function circles(graph: ReadonlyMap<string, readonly string[]>): string[] {
  const done = new Set<string>()
  const found: string[] = []
  const walk = (file: string, above: readonly string[]): void => {
    if (above.includes(file)) {
      found.push([...above.slice(above.indexOf(file)), file].map((at) => path.relative(root, at)).join(' -> '))
      return
    }
    if (done.has(file)) return
    for (const next of graph.get(file) ?? []) walk(next, [...above, file])
    done.add(file)
  }
  for (const file of graph.keys()) walk(file, [])
  return found
}

it('no file loads itself by way of others', () => {
  const graph = new Map(ROOMS.flatMap((room) => files(path.join(root, room))).map((file) => [file, loads(file)]))
  expect([...graph.values()].flat().length).toBeGreaterThan(graph.size)
  expect(circles(graph)).toEqual([])
  expect(circles(new Map([['/a', ['/b']], ['/b', ['/c']], ['/c', ['/a']]]))).toHaveLength(1)
})
