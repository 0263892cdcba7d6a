import { ACCESS_PROBLEMS } from '@/lib/problem/catalogue-access'
import { CURATION_PROBLEMS } from '@/lib/problem/catalogue-curation'
import { EDITION_PROBLEMS } from '@/lib/problem/catalogue-editions'
import { IMPORT_PROBLEMS } from '@/lib/problem/catalogue-import'
import { FIELD_PROBLEMS } from '@/lib/problem/catalogue-field'
import { PHYSICS_PROBLEMS } from '@/lib/problem/catalogue-physics'
import { REQUEST_PROBLEMS } from '@/lib/problem/catalogue-request'

/** One kind of refusal: its status, and what its page says. */
export interface ProblemKind { status: number; title: string; explanation: string; cure: string }

/**
 * Every code that can stand in a problem document or in its `errors`, each with a page at /problems/{code}.
 * A test refuses a code that is used anywhere and missing here.
 */
export const PROBLEMS = { ...REQUEST_PROBLEMS, ...ACCESS_PROBLEMS, ...CURATION_PROBLEMS, ...EDITION_PROBLEMS, ...IMPORT_PROBLEMS, ...PHYSICS_PROBLEMS, ...FIELD_PROBLEMS } satisfies Record<string, ProblemKind>

export type ProblemCode = keyof typeof PROBLEMS

export const isProblemCode = (code: string): code is ProblemCode => Object.hasOwn(PROBLEMS, code)

export const kindOf = (code: string): ProblemKind | undefined => (isProblemCode(code) ? PROBLEMS[code] : undefined)
