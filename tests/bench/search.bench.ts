import { criteriaOfQuery, find } from '@/lib/catalogue/find'
import { listLevels } from '@/lib/catalogue/levels'
import { listLines, spectralWindow } from '@/lib/catalogue/lines'
import { buildSnapshot } from '@/lib/catalogue/snapshot'
import { randomNumbers, syntheticContent } from './synthetic'

export interface Measured {
  readonly what: string
  readonly medianMs: number
  readonly p95Ms: number
  /** What it may take, where the product promises a time. */
  readonly limitMs: number | null
}

function timed(what: string, limitMs: number | null, runs: number, task: (run: number) => number): Measured {
  for (let run = 0; run < 5; run += 1) task(run)
  const times: number[] = []
  let rows = 0
  for (let run = 0; run < runs; run += 1) {
    const begin = performance.now()
    rows += task(run)
    times.push(performance.now() - begin)
  }
  if (rows === 0) throw new Error(`${what}: nothing was found, so nothing was measured`)
  times.sort((a, b) => a - b)
  const at = (part: number): number => times[Math.min(times.length - 1, Math.floor(part * times.length))] ?? Number.NaN
  return { what, medianMs: at(0.5), p95Ms: at(0.95), limitMs }
}

/** Line and level search on an invented edition of 100 species with 1000 levels each. */
export function benchSearch(runs = 200): { loadMs: number; snapshotMb: number; rows: Measured[] } {
  const content = syntheticContent({ species: 100, levels: 1000 })
  const begin = performance.now()
  const snapshot = buildSnapshot(content)
  const loadMs = performance.now() - begin
  const random = randomNumbers(7)
  // a fresh window each time: the counts of a window asked before are remembered, and would flatter
  const lines = (width: number) => () => {
    const minNm = 300 + random() * 600
    const window = spectralWindow({ scale: 'wavelength', minNm, maxNm: minNm + width, medium: 'conventional' })
    const list = listLines(snapshot, { kind: 'E1', rules: 'ls', species: null, window, limit: 100, after: null, explain: false })
    return list?.lines.length ?? 0
  }
  const words = ['3d4 5s', 'z 5F', '5D2', 'Fe I', 'iron odd', 'j=2 g>1', '(3P) 4f', 'invented', 'Ti II 3d2', '5P*', 'invented 7D', '3d6(2S)7p']
  const levels = (run: number) => {
    const q = words[run % words.length] ?? ''
    const list = listLevels(snapshot, { criteria: criteriaOfQuery(snapshot, q), sort: 'energy', limit: 100, after: null, explain: false })
    return list?.indices.length ?? 0
  }
  const rows = [
    timed('lines in 1 nm over 100 species, first 100, exclusions counted', 150, runs, lines(1)),
    timed('lines in 50 nm over 100 species, first 100, exclusions counted', null, Math.ceil(runs / 10), lines(50)),
    timed('levels by words, first 100 of 100 000', 50, runs, levels),
    timed('levels by filters, first 100 of 100 000', 50, runs, (run) => {
      const list = listLevels(snapshot, { criteria: { twoJ: [2 * (run % 4)], gMin: { value: 1 } }, sort: 'g', limit: 100, after: null, explain: false })
      return list?.indices.length ?? 0
    }),
    timed('the search box, levels and lines together', null, Math.ceil(runs / 4), (run) => find(snapshot, words[run % words.length] ?? '', { levels: 50, lines: 50 }).levels.length),
    timed('the search box, 1 nm', 150, Math.ceil(runs / 4), (run) => find(snapshot, `${500 + run}.5±0.5 nm`, { levels: 50, lines: 50 }).lines.length),
  ]
  return { loadMs, snapshotMb: snapshot.bytes / 2 ** 20, rows }
}

/** Prints the figures; false where a promise is broken. */
export function reportSearch(): boolean {
  const { loadMs, snapshotMb, rows } = benchSearch()
  console.log(`snapshot of 100 000 levels: ${loadMs.toFixed(0)} ms to build, about ${snapshotMb.toFixed(0)} MB`)
  for (const { what, medianMs, p95Ms, limitMs } of rows) {
    const promise = limitMs === null ? '' : `, ${(p95Ms / limitMs).toFixed(2)} of the ${limitMs} ms allowed`
    console.log(`${what}: median ${medianMs.toFixed(1)} ms, p95 ${p95Ms.toFixed(1)} ms${promise}`)
  }
  return rows.every(({ p95Ms, limitMs }) => limitMs === null || p95Ms <= limitMs)
}
