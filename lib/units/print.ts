const MINUS = '\u2212'
const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹'

/** Hyphen-minus before a digit becomes the true minus sign. For eyes, never for files. */
export const trueMinus = (text: string): string => text.replace(/-(?=[\d.])/g, MINUS)

/** Fixed-point print with a true minus; no "−0.00". `grouped` puts a thin space between thousands. */
export function printFixed(value: number, digits: number, options: { grouped?: boolean; sign?: boolean } = {}): string {
  if (!Number.isFinite(value)) return String(value)
  const text = value.toFixed(digits)
  const positive = Number(text) === 0 ? text.replace('-', '') : text
  const [whole = '', part] = positive.replace('-', '').split('.')
  const grouped = options.grouped ? whole.replace(/\B(?=(\d{3})+(?!\d))/g, '\u2009') : whole
  const sign = positive.startsWith('-') ? MINUS : options.sign && Number(text) !== 0 ? '+' : ''
  return `${sign}${grouped}${part === undefined ? '' : `.${part}`}`
}

/** Scientific print for reading: `1.234 × 10⁻⁵`; `digits` significant digits. */
export function printScientific(value: number, digits: number): string {
  if (!Number.isFinite(value)) return String(value)
  if (value === 0) return '0'
  const [mantissa = '', exponent = '0'] = value.toExponential(digits - 1).split('e')
  const power = Number(exponent)
  if (power === 0) return trueMinus(mantissa)
  const raised = String(Math.abs(power)).replace(/\d/g, (d) => SUPERSCRIPTS[Number(d)] ?? d)
  return `${trueMinus(mantissa)} × 10${power < 0 ? '⁻' : ''}${raised}`
}

/** Significant digits, fixed where that is short, scientific beyond. */
export function printSignificant(value: number, digits: number): string {
  if (value === 0) return '0'
  const size = Math.floor(Math.log10(Math.abs(value)))
  if (size < -4 || size >= Math.max(digits, 6)) return printScientific(value, digits)
  return printFixed(value, Math.max(0, digits - 1 - size))
}

/**
 * A value with one standard deviation in parentheses in units of its last digits: `1.3362(13)`, `16956.17025(4)`.
 * The deviation is given with two digits when they begin with 1 or 2, else one. Unknown (null): the value alone.
 */
export function printWithUncertainty(value: number, uncertainty: number | null, options: { digits?: number; grouped?: boolean } = {}): string {
  const whole = (digits: number) => printFixed(value, digits, { grouped: options.grouped ?? false })
  if (uncertainty === null || !Number.isFinite(uncertainty)) return options.digits === undefined ? trueMinus(String(value)) : whole(options.digits)
  if (uncertainty <= 0) return options.digits === undefined ? trueMinus(String(value)) : whole(options.digits)
  const exponential = uncertainty.toExponential(1)
  const [mantissa = '0', exponentText = '0'] = exponential.split('e')
  const leading = Number(mantissa)
  const exponent = Number(exponentText)
  const kept = leading < 3 ? 2 : 1
  const decimals = kept - 1 - exponent
  if (decimals < 0) return `${printFixed(Math.round(value / 10 ** -decimals) * 10 ** -decimals, 0)}(${Math.round(uncertainty / 10 ** -decimals) * 10 ** -decimals})`
  const units = Math.round(uncertainty * 10 ** decimals)
  // a deviation of 1 or more is written with its own point, 12.3(1.4), so that it is not read as last digits
  const inside = uncertainty >= 1 && decimals > 0 ? uncertainty.toFixed(decimals) : String(units)
  return `${whole(decimals)}(${inside})`
}
