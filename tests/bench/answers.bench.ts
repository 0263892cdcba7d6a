import { criteriaOfQuery } from '@/lib/catalogue/find'
import { listLevels } from '@/lib/catalogue/levels'
import { buildSnapshot } from '@/lib/catalogue/snapshot'
import { lineList } from '@/lib/prediction/answers/lines'
import { listTransitions } from '@/openapi/operations/transitions'
import { randomNumbers, syntheticContent } from './synthetic'

const percentile = (times: readonly number[], part: number): number => [...times].sort((a, b) => a - b)[Math.min(times.length - 1, Math.floor(part * times.length))] ?? Number.NaN

function measure(what: string, limitMs: number, runs: number, task: (run: number) => number): boolean {
  const times: number[] = []
  let characters = 0
  for (let run = 0; run < runs; run += 1) {
    const begin = performance.now()
    characters += task(run)
    times.push(performance.now() - begin)
  }
  const [half, p95] = [percentile(times, 0.5), percentile(times, 0.95)]
  console.log(`${p95 <= limitMs ? 'kept  ' : 'BROKEN'} ${what}: median ${half.toFixed(1)} ms, p95 ${p95.toFixed(1)} ms of ${limitMs} ms allowed (${Math.round(characters / runs / 1000)} kB of JSON)`)
  return p95 <= limitMs
}

/**
 * Whole answers, written as JSON, on an invented edition of 100 species with 1000 levels each: search, assembly of every line
 * with verdict, g_eff, moments and pattern, and text. No run is left out, the first and coldest neither.
 */
export function reportAnswers(runs = 200): boolean {
  const snapshot = buildSnapshot(syntheticContent({ species: 100, levels: 1000 }))
  const random = randomNumbers(11)
  const lines = measure('lines in 1 nm over all species, first 100, as the API answers', 150, runs, () => {
    const minNm = 300 + random() * 600
    const query = listTransitions.query.parse({ wavelength_min_nm: String(minNm), wavelength_max_nm: String(minNm + 1) })
    return JSON.stringify(lineList(snapshot, query, null, () => undefined).data).length
  })
  const words = ['3d4 5s', 'z 5F', '5D2', 'Fe I', 'iron odd', 'j=2 g>1', '(3P) 4f', 'invented', 'Ti II 3d2', '5P*', 'invented 7D', '3d6(2S)7p']
  const levels = measure('levels by words, first 100 of 100 000, as the API answers', 50, runs, (run) => {
    const criteria = criteriaOfQuery(snapshot, words[run % words.length] ?? '')
    const list = listLevels(snapshot, { criteria, sort: 'energy', limit: 100, after: null, explain: false })
    return JSON.stringify((list?.indices ?? []).map((index) => snapshot.level(index))).length
  })
  return lines && levels
}
