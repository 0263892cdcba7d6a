import type { z } from 'zod'
import { find as findIn } from '@/lib/catalogue/find'
import type { Snapshot } from '@/lib/catalogue/shape'
import { warnOfAir } from '@/lib/prediction/answers/lines'
import { LINE_CONVENTIONS } from '@/lib/prediction/conventions'
import { assembleTransition } from '@/lib/prediction/transition'
import type { find } from '@/openapi/operations/find'

/** The one search box: levels and lines together, each with its total, and how every word was understood. */
export function findAnswer(snapshot: Snapshot, query: z.output<(typeof find)['query']>, warn: (code: string, detail: string) => void) {
  const found = findIn(snapshot, query.q, { levels: query.levels_limit, lines: query.lines_limit })
  const lines = found.lines.map(({ lower, upper }) => assembleTransition(snapshot, lower, upper))
  warnOfAir(lines, warn)
  return {
    data: {
      understood: found.understood,
      questions: found.questions,
      levels: found.levels.map((index) => snapshot.level(index)),
      levels_total: found.levelsTotal,
      lines,
      lines_total: found.linesTotal,
      lines_total_is_lower_bound: found.linesTotalIsLowerBound,
    },
    meta: { conventions: LINE_CONVENTIONS },
  }
}
