/** Printing numbers for reading: true minus, digits chosen by the place where they stand. The API's own numbers are never rounded. */

const MINUS = '\u2212'
const trueMinus = (text: string): string => text.replace(/-/g, MINUS)

/** Fixed decimals with a true minus; thousands in thin spaces from five digits on. */
export function fixed(value: number, decimals: number, group = true): string {
  const [whole = '', part] = Math.abs(value).toFixed(decimals).split('.')
  const grouped = group && whole.length > 4 ? whole.replace(/\B(?=(\d{3})+$)/g, '\u2009') : whole
  const body = part === undefined ? grouped : `${grouped}.${part}`
  const negative = value < 0 && Number(value.toFixed(decimals)) !== 0
  return `${negative ? MINUS : ''}${body}`
}

/** How many decimals a stored number carries, so that none are shown that it does not have. */
export const decimalsOf = (value: number): number => (/e/.test(String(value)) ? 0 : (String(value).split('.')[1] ?? '').length)

/** Significant digits; powers of ten where the number is very small or very large. */
export function significant(value: number, digits = 4): string {
  if (value === 0) return '0'
  const size = Math.abs(value)
  if (size >= 1e6 || size < 1e-4) {
    const [mantissa = '', exponent = '0'] = value.toExponential(digits - 1).split('e')
    return `${trueMinus(mantissa)}\u2009×\u200910${superscript(Number(exponent))}`
  }
  return trueMinus(Number(value.toPrecision(digits)).toString())
}

const RAISED = '⁰¹²³⁴⁵⁶⁷⁸⁹'
const superscript = (value: number): string =>
  `${value < 0 ? '⁻' : ''}${[...String(Math.abs(value))].map((digit) => RAISED[Number(digit)] ?? '').join('')}`

/** `1.3362(13)`: the uncertainty in units of the last digits shown, two of them. Null where it cannot be printed so. */
export function withUncertainty(value: number, uncertainty: number): string | null {
  if (!(uncertainty > 0) || !Number.isFinite(uncertainty)) return null
  const exponent = Math.floor(Math.log10(uncertainty))
  const decimals = 1 - exponent
  if (decimals < 0 || decimals > 12) return null
  const last = Math.round(uncertainty * 10 ** decimals)
  return `${fixed(value, decimals)}(${last})`
}

/** 1.5 -> "3/2", 2 -> "2", -0.5 -> "−1/2". */
export function halves(value: number): string {
  const twice = Math.round(value * 2)
  const body = twice % 2 === 0 ? String(Math.abs(twice) / 2) : `${Math.abs(twice)}/2`
  return `${twice < 0 ? MINUS : ''}${body}`
}

export const count = (value: number): string => fixed(value, 0)
export const plural = (value: number, one: string, many = `${one}s`): string => `${count(value)} ${value === 1 ? one : many}`
