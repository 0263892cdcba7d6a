/** A plain decimal number as people type it: sign, digits, point, exponent; the true minus sign is read as minus. Null when it is not one. */
export function readNumber(text: string): number | null {
  const plain = text.trim().replace(/^[\u2212\u2013]/, '-')
  if (!/^[+-]?(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+)?$/.test(plain)) return null
  const value = Number(plain)
  return Number.isFinite(value) ? value : null
}

/** Splits `1.5 mT` into its number and the unit text; null when it does not begin with a number. */
export function splitQuantity(text: string): { value: number; unitText: string; finite: boolean } | null {
  const match = /^([+\-\u2212\u2013]?(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+)?)(.*)$/s.exec(text.trim())
  if (!match) return null
  const value = Number((match[1] ?? '').replace(/^[\u2212\u2013]/, '-'))
  return { value, unitText: (match[2] ?? '').trim(), finite: Number.isFinite(value) }
}

/** Quotes what a caller typed, cut short and without control characters, so that it can stand in an error sentence. */
export function quoted(text: string): string {
  const clean = text.replace(/[\u0000-\u001f\u007f-\u009f\u2028\u2029]/g, '\u00b7')
  return `"${clean.length > 60 ? `${clean.slice(0, 57)}...` : clean}"`
}

/** -0 is no physics: it would print as a minus sign. */
export const plusZero = (value: number): number => (value === 0 ? 0 : value)
