import type { FocusEvent, KeyboardEvent } from 'react'

interface Roving {
  /** Keys of the items in reading order. */
  order: readonly string[]
  active: string | null
  onActive: (key: string | null) => void
  /** Where the up and down arrows lead from an item, if anywhere. */
  across?: (key: string, upwards: boolean) => string | null
}

/**
 * One tab stop for many marks of a drawing: arrows, Home and End move the focus among them, Escape lets go.
 * Spread the result on each mark's group; it is found again by its `data-mark`.
 */
export function roving({ order, active, onActive, across }: Roving) {
  const stop = active !== null && order.includes(active) ? active : order[0]
  return (key: string) => ({
    'data-mark': key,
    tabIndex: key === stop ? 0 : -1,
    style: { outline: 'none' } as const,
    onFocus: () => onActive(key),
    onBlur: (event: FocusEvent<SVGGElement>) => {
      const next = event.relatedTarget
      if (!(next instanceof Element) || next.getAttribute('data-mark') === null) onActive(null)
    },
    onKeyDown: (event: KeyboardEvent<SVGGElement>) => {
      const place = order.indexOf(key)
      const target =
        event.key === 'ArrowRight' ? order[place + 1]
        : event.key === 'ArrowLeft' ? order[place - 1]
        : event.key === 'Home' ? order[0]
        : event.key === 'End' ? order[order.length - 1]
        : event.key === 'ArrowUp' || event.key === 'ArrowDown' ? (across?.(key, event.key === 'ArrowUp') ?? undefined)
        : undefined
      if (event.key === 'Escape') event.currentTarget.blur()
      if (event.key.startsWith('Arrow') || event.key === 'Home' || event.key === 'End') event.preventDefault()
      if (target === undefined) return
      event.currentTarget.ownerSVGElement?.querySelector<SVGGElement>(`[data-mark="${CSS.escape(target)}"]`)?.focus()
    },
  })
}
