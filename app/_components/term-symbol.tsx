import type { ReactNode } from 'react'

export interface TermLike { symbol: string; label?: string | null }

const minus = (text: string): string => text.replace(/-/g, '\u2212')

/** The letter of repeated terms is set in italics before the symbol, since it is a name and not part of the term. */
function Body({ symbol }: { symbol: string }): ReactNode {
  const ls = /^(\d+)([A-Z])(\*?)(.*)$/.exec(symbol)
  if (ls) {
    const [, multiplicity, letter, odd, j] = ls
    return (
      <>
        <sup>{multiplicity}</sup>
        {letter}
        {odd === '*' ? '°' : ''}
        {j ? <sub>{minus(j)}</sub> : null}
      </>
    )
  }
  const pair = /^(\d*)\[([^\]]+)\](\*?)(.*)$/.exec(symbol)
  if (pair) {
    const [, multiplicity, k, odd, j] = pair
    return (
      <>
        {multiplicity ? <sup>{multiplicity}</sup> : null}[{k}]{odd === '*' ? '°' : ''}
        {j ? <sub>{j}</sub> : null}
      </>
    )
  }
  const jj = /^\(([^)]+)\)(\*?)(.*)$/.exec(symbol)
  if (jj) {
    const [, inside = '', odd, j] = jj
    return (
      <>
        ({inside.split(',').join(',\u2009')}){odd === '*' ? '°' : ''}
        {j ? <sub>{j}</sub> : null}
      </>
    )
  }
  return symbol
}

/** How a term symbol is said: "2 P odd, J = 3/2". */
export function spokenTerm(symbol: string): string {
  const ls = /^(\d+)([A-Z])(\*?)(.*)$/.exec(symbol)
  if (ls) return `${ls[1]} ${ls[2]}${ls[3] ? ' odd' : ''}${ls[4] ? `, J = ${ls[4]}` : ''}`
  const pair = /^(\d*)\[([^\]]+)\](\*?)(.*)$/.exec(symbol)
  if (pair) return `${pair[1]} K = ${pair[2]}${pair[3] ? ' odd' : ''}${pair[4] ? `, J = ${pair[4]}` : ''}`
  return symbol
}

/**
 * A term symbol set as printed: raised multiplicity, lowered J, degree sign for odd parity.
 * `term` is the ASCII symbol (`2P*3/2`, `2[3/2]*2`, `(3/2,1/2)*1`) or an object that has one, with its label.
 */
export function TermSymbol({ term, withoutJ = false, className = '' }: { term: TermLike | string; withoutJ?: boolean; className?: string }) {
  const { symbol, label } = typeof term === 'string' ? { symbol: term, label: null } : term
  const shown = withoutJ ? symbol.replace(/^((?:\d+[A-Z]|\d*\[[^\]]+\]|\([^)]+\))\*?).*$/, '$1') : symbol
  return (
    <span className={`symbol ${className}`}>
      <span className="sr-only">{`${label ? `${label} ` : ''}${spokenTerm(shown)}`}</span>
      <span aria-hidden="true">
        {label ? <i>{label}&#8201;</i> : null}
        <Body symbol={shown} />
      </span>
    </span>
  )
}
