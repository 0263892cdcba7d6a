/** What a parser gives back: the value, or a code and a sentence that says what is wrong and how to mend it. */
export type Parsed<T> = { ok: true; value: T } | { ok: false; code: string; detail: string }

export const parsed = <T>(value: T): Parsed<T> => ({ ok: true, value })

export const refused = (code: string, detail: string): { ok: false; code: string; detail: string } => ({ ok: false, code, detail })
