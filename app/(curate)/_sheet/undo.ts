/** What can be taken back: each entry holds the state before and after of everything it touched. */
export interface Step<S> { label: string; changes: readonly { key: string; before: S; after: S }[] }
export interface History<S> { done: readonly Step<S>[]; undone: readonly Step<S>[] }

const KEPT = 200
export const emptyHistory = <S>(): History<S> => ({ done: [], undone: [] })

/** A new step; what had been undone is gone. */
export const record = <S>(history: History<S>, step: Step<S>): History<S> =>
  step.changes.length === 0 ? history : { done: [...history.done.slice(1 - KEPT), step], undone: [] }

export function undo<S>(history: History<S>): { history: History<S>; step: Step<S> } | null {
  const step = history.done.at(-1)
  return step === undefined ? null : { step, history: { done: history.done.slice(0, -1), undone: [...history.undone, step] } }
}

export function redo<S>(history: History<S>): { history: History<S>; step: Step<S> } | null {
  const step = history.undone.at(-1)
  return step === undefined ? null : { step, history: { done: [...history.done, step], undone: history.undone.slice(0, -1) } }
}
