'use client'
import type { AuditEvent } from '@/openapi/schemas/audit'
import { DataTable, type Column } from '../../_components/data-table'
import { differences, rawText } from './audit-text'
import { moment } from '../../_components/day'

type Filter = (name: 'actor' | 'key' | 'session' | 'action' | 'subject_id', value: string) => void

function Narrow({ children, label, onClick }: { children: React.ReactNode; label: string; onClick: () => void }) {
  return <button type="button" className="link min-h-6 text-left" title={label} aria-label={label} onClick={onClick}>{children}</button>
}

const short = (id: string): string => (/^[0-9a-f-]{36}$/.test(id) ? id.slice(0, 8) : id)

function By({ event, onFilter }: { event: AuditEvent; onFilter: Filter }) {
  const { key, session, actor } = event
  if (key !== null) return <Narrow label={`Only what was done with the key ${event.key_name ?? key}`} onClick={() => onFilter('key', key)}>key {event.key_name ?? short(key)}</Narrow>
  if (session !== null) return <Narrow label={`Only what was done in session ${session}`} onClick={() => onFilter('session', session)}>session <code className="text-xs">{short(session)}</code></Narrow>
  return <span className="text-muted">{actor === null && event.ip === null ? 'command line' : 'no session'}</span>
}

const SHOWN = 40

/** What changed, value by value, and behind it the row as it is stored. */
function Changes({ event }: { event: AuditEvent }) {
  const told = differences(event.before, event.after)
  if (event.before === null && event.after === null) return <span className="text-muted">no values</span>
  // of what is only made or only ended there is nothing to set side by side
  const [had, has] = [told.some(({ before }) => before !== null), told.some(({ after }) => after !== null)]
  return (
    <div className="w-[24rem] max-w-[80vw] space-y-1.5">
      {told.length === 0 ? <p className="text-muted">nothing differs</p> : (
        <div className="max-h-56 overflow-auto" tabIndex={0} role="region" aria-label={`What ${event.action} changed`}>
          <table className="w-full table-fixed text-left [&_td]:whitespace-normal! [&_td]:py-0.5! [&_th]:whitespace-normal! [&_th]:py-0.5! [&_th]:font-normal! [&_tr]:border-0! [overflow-wrap:anywhere]">
            <thead><tr className="text-xs text-muted"><th scope="col">Value</th>{had ? <th scope="col">Before</th> : null}{has ? <th scope="col">After</th> : null}</tr></thead>
            <tbody>
              {told.slice(0, SHOWN).map(({ name, before, after }) => (
                <tr key={name}>
                  <th scope="row" className="text-muted">{name}</th>
                  {had ? <td>{before === null ? <span className="text-muted">nothing</span> : <del className="text-muted no-underline">{before}</del>}</td> : null}
                  {has ? <td>{after === null ? <span className="text-muted">nothing</span> : <ins className="no-underline">{after}</ins>}</td> : null}
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      )}
      {told.length > SHOWN ? <p className="note">{told.length - SHOWN} more values stand in the JSON.</p> : null}
      <details>
        <summary className="link inline-block min-h-6 text-xs">as stored, JSON</summary>
        <pre className="mt-1 max-h-72 overflow-auto border-l-2 border-rule pl-3 text-xs whitespace-pre-wrap [overflow-wrap:anywhere]" tabIndex={0} role="region" aria-label={`${event.action} as stored`}>{rawText(event.before, event.after)}</pre>
      </details>
    </div>
  )
}

const columnsOf = (onFilter: Filter): Column<AuditEvent>[] => [
  { name: 'at', header: 'When', rowHeader: true, value: (row) => row.at, cell: (row) => moment(row.at) },
  { name: 'actor', header: 'Who', value: (row) => row.actor?.name ?? null, cell: (row) => (row.actor === null ? <span className="text-muted">nobody signed in</span> : <Narrow label={`Only what ${row.actor.name} did`} onClick={() => onFilter('actor', row.actor?.id ?? '')}>{row.actor.name}</Narrow>) },
  { name: 'action', header: 'What', value: (row) => row.action, cell: (row) => <Narrow label={`Only ${row.action}`} onClick={() => onFilter('action', row.action)}>{row.action}</Narrow> },
  { name: 'subject', header: 'Of', value: (row) => `${row.subject.kind} ${row.subject.id ?? ''}`, cell: (row) => <>{row.subject.kind}{row.subject.id === null ? null : <> <Narrow label={`Only about ${row.subject.kind} ${row.subject.id}`} onClick={() => onFilter('subject_id', row.subject.id ?? '')}><code className="text-xs">{short(row.subject.id)}</code></Narrow></>}</> },
  { name: 'changes', header: 'Before and after', wrap: true, value: (row) => differences(row.before, row.after).map(({ name, before, after }) => `${name}: ${before ?? ''} -> ${after ?? ''}`).join('; '), cell: (row) => <Changes event={row} /> },
  { name: 'by', header: 'By', value: (row) => row.key ?? row.session, cell: (row) => <By event={row} onFilter={onFilter} /> },
  { name: 'ip', header: 'From', value: (row) => row.ip, cell: (row) => (row.ip === null ? <span className="text-muted">this machine</span> : <code className="text-xs">{row.ip}</code>) },
  { name: 'request_id', header: 'Request', only: 'copy', value: (row) => row.request_id },
]

/** Audit rows; who, what and by what lead to all rows of the same. */
export function AuditTable({ events, onFilter }: { events: readonly AuditEvent[]; onFilter: Filter }) {
  return <DataTable columns={columnsOf(onFilter)} rows={events} rowKey={(row) => String(row.id)} caption="Audit" hideCaption />
}
