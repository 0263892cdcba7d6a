import fs from 'node:fs'
import path from 'node:path'
import ts from 'typescript'
import { describe, expect, it } from 'vitest'

const root = path.resolve(import.meta.dirname, '../..')
const ROOMS = ['app', 'db', 'lib', 'openapi', 'seeds']

function sources(folder: string): string[] {
  return fs.readdirSync(folder, { withFileTypes: true }).flatMap((entry) => {
    const full = path.join(folder, entry.name)
    if (entry.isDirectory()) return sources(full)
    return /\.tsx?$/.test(entry.name) && !entry.name.endsWith('.d.ts') ? [full] : []
  })
}

/** The project's files that a file imports when it runs; imports of types alone are gone by then. */
function importsOf(file: string, known: ReadonlySet<string>): string[] {
  const tree = ts.createSourceFile(file, fs.readFileSync(file, 'utf8'), ts.ScriptTarget.Latest, false)
  const named = tree.statements.flatMap((statement) => {
    if (!ts.isImportDeclaration(statement) && !ts.isExportDeclaration(statement)) return []
    if (statement.moduleSpecifier === undefined || !ts.isStringLiteral(statement.moduleSpecifier)) return []
    if (ts.isExportDeclaration(statement) ? statement.isTypeOnly : onlyTypes(statement.importClause)) return []
    return [statement.moduleSpecifier.text]
  })
  return named.flatMap((name) => {
    const base = name.startsWith('@/') ? path.join(root, name.slice(2)) : name.startsWith('.') ? path.resolve(path.dirname(file), name) : null
    const found = base === null ? undefined : [base, `${base}.ts`, `${base}.tsx`, path.join(base, 'index.ts'), path.join(base, 'index.tsx')].find((candidate) => known.has(candidate))
    return found === undefined ? [] : [found]
  })
}

function onlyTypes(clause: ts.ImportClause | undefined): boolean {
  if (clause === undefined) return false
  if (clause.phaseModifier === ts.SyntaxKind.TypeKeyword) return true
  const bindings = clause.namedBindings
  return clause.name === undefined && bindings !== undefined && ts.isNamedImports(bindings) && bindings.elements.length > 0 && bindings.elements.every((element) => element.isTypeOnly)
}

/** The first circle of each connected group, as a walk that ends where it began. */
function circles(graph: ReadonlyMap<string, readonly string[]>): string[][] {
  const [found, done, walk]: [string[][], Set<string>, string[]] = [[], new Set(), []]
  const visit = (file: string) => {
    const begun = walk.indexOf(file)
    if (begun >= 0) {
      found.push([...walk.slice(begun), file])
      return
    }
    if (done.has(file)) return
    walk.push(file)
    for (const next of graph.get(file) ?? []) visit(next)
    walk.pop()
    done.add(file)
  }
  for (const file of graph.keys()) visit(file)
  return found
}

describe('imports', () => {
  it('finds a circle where there is one', () => {
    expect(circles(new Map([['a', ['b', 'c']], ['b', ['c']], ['c', []]]))).toEqual([])
    expect(circles(new Map([['a', ['b']], ['b', ['c']], ['c', ['b']]]))).toEqual([['b', 'c', 'b']])
  })

  it('go in no circles', () => {
    const files = ROOMS.flatMap((room) => sources(path.join(root, room)))
    const known = new Set(files)
    const graph = new Map(files.map((file) => [file, importsOf(file, known)]))
    // Without edges there would be no circles either.
    expect([...graph.values()].flat().length).toBeGreaterThan(files.length)
    expect(circles(graph).map((circle) => circle.map((file) => path.relative(root, file)).join(' -> '))).toEqual([])
  })
})
