import { fixed, significant, withUncertainty } from './number'

export interface QuantityProps {
  value: number | null | undefined
  /** Printed after the number with a thin space, e.g. `cm⁻¹`. */
  unit?: string
  /** One standard deviation, in the same unit. */
  unc?: number | null
  /** Decimals where there is no uncertainty; else significant digits are used. */
  decimals?: number
  digits?: number
  /** What null means here. */
  absent?: 'unknown' | 'not_applicable'
  sign?: boolean
  className?: string
}

/** A number as the trade prints it: true minus, uncertainty in the last digits, and never a bare blank for what is not known. */
export function Quantity({ value, unit, unc, decimals, digits = 6, absent = 'unknown', sign = false, className = '' }: QuantityProps) {
  if (value === null || value === undefined) {
    return <span className={`text-muted ${className}`}>{absent === 'not_applicable' ? 'does not apply' : 'not known'}</span>
  }
  const printed =
    (typeof unc === 'number' ? withUncertainty(value, unc) : null) ?? (decimals === undefined ? significant(value, digits) : fixed(value, decimals))
  return (
    <span className={`num whitespace-nowrap ${className}`} title={`${value}${unit ? ` ${unit}` : ''}`}>
      {sign && value > 0 ? '+' : ''}
      {printed}
      {unit ? <span className="text-muted">{`\u202f${unit}`}</span> : null}
    </span>
  )
}
