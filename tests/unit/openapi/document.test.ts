import fs from 'node:fs'
import path from 'node:path'
import { describe, expect, it } from 'vitest'
import { PROBLEMS } from '@/lib/problem'
import { OPERATIONS } from '@/openapi'
import { documentText } from '@/openapi/core/registry'

const root = path.resolve(import.meta.dirname, '../../..')
const files = (folder: string): string[] =>
  fs.readdirSync(path.join(root, folder), { withFileTypes: true }).flatMap((entry) => (entry.isDirectory() ? files(path.join(folder, entry.name)) : [path.join(folder, entry.name)]))

describe('the OpenAPI document', () => {
  it('is what the contracts make; npm run openapi writes it anew', () => {
    expect(fs.readFileSync(path.join(root, 'openapi/openapi.json'), 'utf8')).toBe(documentText(OPERATIONS))
  })

  it('names every operation once', () => {
    const ids = OPERATIONS.map((operation) => operation.id)
    expect(new Set(ids).size).toBe(ids.length)
    const places = OPERATIONS.map((operation) => `${operation.method} ${operation.path}`)
    expect(new Set(places).size).toBe(places.length)
  })

  it('has a route for every path, and a path for every route', () => {
    const routes = files('app/api/v1').filter((file) => file.endsWith('route.ts')).map((file) => `/${path.relative('app/api/v1', path.dirname(file)).replace(/\[([^\]]+)\]/g, '{$1}')}`)
    const paths = new Set(OPERATIONS.map((operation) => operation.path))
    expect(routes.filter((route) => !route.includes('...')).sort()).toEqual([...paths].sort())
  })
})

describe('problems', () => {
  // codes that stand beside an answer as warnings are told there, and have no page
  const WARNINGS = new Set([
    'g_unc_unknown', 'term_not_pure', 'g_s_not_applied', 'hyperfine_ignored', 'air_extrapolated', 'level_crossing', 'levels_exchanged',
    'diamagnetic_ignored', 'diamagnetic_missing', 'diamagnetic_large', 'diamagnetic_rough', 'no_ls_amplitude',
    'g_i_unknown', 'hyperfine_constants_missing', 'isotope_shift_unknown', 'isotope_chosen', 'j_mixing_ignored', 'nuclear_spin_unknown', 'abundance_incomplete',
  ])
  const FORMS = [/\bnew (?:Problem|PhysicsError)\(\s*'([a-z_0-9]+)'/g, /\b(?:refused|refuse|notFound)\(\s*'([a-z_0-9]+)'/g, /\b(?:parameterProblem|bodyProblem)\([^,()]*,\s*'([a-z_0-9]+)'/g, /\bcode: '([a-z_0-9]+)', detail/g]

  it('have a page for every code that is used', () => {
    const missing = new Set<string>()
    let seen = 0
    for (const file of [...files('lib'), ...files('openapi'), ...files('app/api')].filter((name) => name.endsWith('.ts'))) {
      const text = fs.readFileSync(path.join(root, file), 'utf8')
      for (const form of FORMS) {
        for (const [, code = ''] of text.matchAll(form)) {
          seen += 1
          if (!Object.hasOwn(PROBLEMS, code) && !WARNINGS.has(code)) missing.add(`${code} in ${file}`)
        }
      }
    }
    expect(seen).toBeGreaterThan(100)
    expect([...missing]).toEqual([])
  })

  it('say what happened and how to mend it', () => {
    for (const [code, kind] of Object.entries(PROBLEMS)) {
      expect(code).toMatch(/^[a-z][a-z0-9_]+$/)
      expect(kind.status).toBeGreaterThanOrEqual(400)
      for (const text of [kind.title, kind.explanation, kind.cure]) expect(text.length, code).toBeGreaterThan(5)
    }
  })
})
