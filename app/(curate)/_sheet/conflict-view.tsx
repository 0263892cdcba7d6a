'use client'
import { useState } from 'react'
import { Dialog } from '../_parts/dialog'
import { ValueText } from '../_parts/values-text'
import { type ChangeState, stateOf, subjectName } from './change-state'
import { fieldWords } from './columns'
import { type Clash, clashes, merged, type Side, suggested } from './merge'
import type { SheetRow } from './sheet'

const WORDS: Record<string, string> = { action: 'What is done', reason: 'Reason', successor: 'Successor', comment: 'Comment on warnings' }
const wordOf = (field: string): string => WORDS[field] ?? fieldWords(field)

function Choice({ clash, side, chosen, onChoose }: { clash: Clash; side: Side; chosen: boolean; onChoose: () => void }) {
  const value = <ValueText field={clash.field} value={side === 'mine' ? clash.mine : clash.theirs} />
  if (!clash.differ) return <td className="whitespace-normal!">{value}</td>
  return (
    <td className={`whitespace-normal! ${chosen ? 'bg-lamp-wash' : ''}`}>
      <label className="flex min-h-7 items-baseline gap-2 px-1.5">
        <input type="radio" name={clash.field} checked={chosen} onChange={onChoose} className="translate-y-0.5 accent-lamp" aria-label={`${wordOf(clash.field)}: ${side === 'mine' ? 'mine' : 'theirs'}`} />
        <span>{value}</span>
      </label>
    </td>
  )
}

/** Mine and theirs side by side, value by value, with a choice where they differ. Nothing is lost until one is chosen. */
export function ConflictView({ row, onResolve, onClose }: { row: SheetRow; onResolve: (wanted: ChangeState | null) => void; onClose: () => void }) {
  const theirs = row.theirs?.change ?? null
  const before = row.server === null ? null : stateOf(row.server)
  const other = theirs === null ? null : stateOf(theirs)
  // a change made by both from nothing began with what is published
  const base = before ?? (row.base === null ? null : { action: 'replace' as const, values: row.base, reason: null, successor: null, comment: null })
  const list = clashes(base, row.wanted, other)
  const open = list.filter((clash) => clash.differ)
  const [choices, setChoices] = useState<Record<string, Side>>(() => Object.fromEntries(open.map((clash) => [clash.field, suggested(clash)])))
  const name = subjectName(row.subject)
  const whole = row.wanted === null || other === null
  return (
    <Dialog title={`Two versions of ${name}`} onClose={onClose} wide>
      <div className="space-y-4">
        <p>
          {theirs === null ? 'Someone took this change out while you were editing it.' : row.wanted === null ? `${theirs.author.name} edited this change while you took it out.` : `${theirs.author.name} wrote this row while you were editing it.`}{' '}
          Nothing is lost: yours is kept here, theirs on the server, until you choose.
        </p>
        {whole ? null : (
          <div className="overflow-x-auto" tabIndex={0} role="region" aria-label="Both versions">
            <table className="ruled w-full max-sm:table-fixed max-sm:[overflow-wrap:anywhere]">
              <caption className="sr-only">Both versions, value by value</caption>
              <thead><tr><th scope="col">Value</th><th scope="col" className="max-sm:hidden">Before</th><th scope="col">Mine</th><th scope="col">Theirs</th></tr></thead>
              <tbody>
                {list.map((clash) => (
                  <tr key={clash.field}>
                    <th scope="row" className="whitespace-normal! text-muted">{wordOf(clash.field)}{clash.differ ? null : <span className="block text-2xs">the same in both</span>}</th>
                    <td className="whitespace-normal! text-muted max-sm:hidden"><ValueText field={clash.field} value={clash.base} /></td>
                    {(['mine', 'theirs'] as const).map((side) => (
                      <Choice key={side} clash={clash} side={side} chosen={choices[clash.field] === side} onChoose={() => setChoices({ ...choices, [clash.field]: side })} />
                    ))}
                  </tr>
                ))}
              </tbody>
            </table>
          </div>
        )}
        {open.length === 0 && !whole ? <p className="note">Both versions say the same.</p> : null}
        <div className="flex flex-wrap gap-2">
          {whole ? null : <button type="button" className="btn btn-lamp" onClick={() => onResolve(merged(row.wanted, other, choices))}>Write the choice</button>}
          <button type="button" className="btn" onClick={() => onResolve(row.wanted)}>{row.wanted === null ? 'Take it out all the same' : theirs === null ? 'Write mine again' : 'Keep all of mine'}</button>
          <button type="button" className="btn" onClick={() => onResolve(other)}>{theirs === null ? 'Leave it out' : 'Take all of theirs'}</button>
          <button type="button" className="btn btn-quiet" onClick={onClose}>Decide later</button>
        </div>
      </div>
    </Dialog>
  )
}
