/** The block of cells in focus: it reaches from `anchor` to `head`, which is the cell that has the focus. */
export interface Place { row: number; column: number }
export interface Selection { anchor: Place; head: Place }
export interface Block { top: number; bottom: number; left: number; right: number }
export interface Extent { rows: number; columns: number; page: number }

export const at = (row: number, column: number): Selection => ({ anchor: { row, column }, head: { row, column } })

export const blockOf = ({ anchor, head }: Selection): Block => ({
  top: Math.min(anchor.row, head.row), bottom: Math.max(anchor.row, head.row),
  left: Math.min(anchor.column, head.column), right: Math.max(anchor.column, head.column),
})
export const sizeOf = (block: Block): number => (block.bottom - block.top + 1) * (block.right - block.left + 1)
export const isInside = (block: Block, row: number, column: number): boolean => row >= block.top && row <= block.bottom && column >= block.left && column <= block.right

const within = (value: number, end: number): number => Math.max(0, Math.min(value, end - 1))
export const clamp = (selection: Selection, extent: Pick<Extent, 'rows' | 'columns'>): Selection => {
  const kept = ({ row, column }: Place): Place => ({ row: within(row, extent.rows), column: within(column, extent.columns) })
  return { anchor: kept(selection.anchor), head: kept(selection.head) }
}

export interface Press { key: string; shift?: boolean; ctrl?: boolean }

/** Where a key leads; null where it does not move. `filled` says whether a cell holds anything, for jumps to the edge of a run. */
export function moved(selection: Selection, press: Press, extent: Extent, filled: (row: number, column: number) => boolean = () => true): Selection | null {
  const { head } = selection
  const last = { row: extent.rows - 1, column: extent.columns - 1 }
  const step = (rows: number, columns: number): Place =>
    press.ctrl ? jump(head, rows, columns, extent, filled) : { row: within(head.row + rows, extent.rows), column: within(head.column + columns, extent.columns) }
  const target = ((): Place | null => {
    switch (press.key) {
      case 'ArrowUp': return step(-1, 0)
      case 'ArrowDown': return step(1, 0)
      case 'ArrowLeft': return step(0, -1)
      case 'ArrowRight': return step(0, 1)
      case 'PageUp': return { row: within(head.row - extent.page, extent.rows), column: head.column }
      case 'PageDown': return { row: within(head.row + extent.page, extent.rows), column: head.column }
      case 'Home': return press.ctrl ? { row: 0, column: 0 } : { row: head.row, column: 0 }
      case 'End': return press.ctrl ? last : { row: head.row, column: last.column }
      default: return null
    }
  })()
  if (target === null) return null
  return press.shift ? { anchor: selection.anchor, head: target } : { anchor: target, head: target }
}

/** To the last cell of a run of filled ones, or over a gap to the next filled one, or to the edge. */
function jump(from: Place, rows: number, columns: number, extent: Extent, filled: (row: number, column: number) => boolean): Place {
  const inside = ({ row, column }: Place): boolean => row >= 0 && row < extent.rows && column >= 0 && column < extent.columns
  const next = ({ row, column }: Place): Place => ({ row: row + rows, column: column + columns })
  const full = ({ row, column }: Place): boolean => filled(row, column)
  let place = from
  let ahead = next(place)
  if (!inside(ahead)) return place
  if (full(place) && full(ahead)) {
    while (inside(ahead) && full(ahead)) { place = ahead; ahead = next(place) }
    return place
  }
  while (inside(ahead)) {
    place = ahead
    if (full(place)) return place
    ahead = next(place)
  }
  return place
}

/** Tab goes right and on to the next row at the end; at the table's own end it leaves (null), so that the keyboard is never caught. */
export function tabbed(selection: Selection, backwards: boolean, extent: Pick<Extent, 'rows' | 'columns'>): Selection | null {
  const { row, column } = selection.head
  const place = row * extent.columns + column + (backwards ? -1 : 1)
  if (place < 0 || place >= extent.rows * extent.columns) return null
  return at(Math.floor(place / extent.columns), place % extent.columns)
}
