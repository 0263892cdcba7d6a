const FORMULA = /^[=+\-@\t\r]/
const ESCAPED = /^'['=+\-@\t\r]/

/**
 * Text that a spreadsheet would run as a formula (it begins with = + - @ tab or CR) gets an apostrophe before it, and an
 * apostrophe that stands first is doubled, so that `unescapeText` undoes exactly this. Text cells only: negative numbers stay numbers.
 */
export const escapeText = (text: string): string => (text.startsWith("'") || FORMULA.test(text) ? `'${text}` : text)

/** The inverse of `escapeText`, for import. */
export const unescapeText = (text: string): string => (ESCAPED.test(text) ? text.slice(1) : text)
