import type { ImportProblem } from '@/openapi/schemas/import'

/** A file that cannot be imported as a whole: everything that is wrong with it. */
export class FileRefused extends Error {
  constructor(readonly problems: readonly ImportProblem[]) {
    super(problems[0]?.detail ?? 'refused')
  }
}

export const refused = (code: string, detail: string): FileRefused => new FileRefused([{ code, detail }])
