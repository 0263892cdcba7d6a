'use client'
import type { AuditEvent } from '@/openapi/schemas/audit'
import { DataTable, type Column } from '../../_components/data-table'
import { differences } from './audit-text'
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

function Changes({ event }: { event: AuditEvent }) {
  const told = differences(event.before, event.after)
  if (told.length === 0) return <span className="text-muted">no values</span>
  return (
    <ul>
      {told.map(({ name, before, after }) => (
        <li key={name}>
          <span className="text-muted">{name.replace(/_/g, ' ')}: </span>
          {before === null ? null : <><del className="text-muted">{before}</del>{after === null ? null : ' → '}</>}
          {after === null ? null : <span>{after}</span>}
        </li>
      ))}
    </ul>
  )
}

const columnsOf = (onFilter: Filter): Column<AuditEvent>[] => [
  { name: 'at', header: 'When', rowHeader: true, value: (row) => row.at, cell: (row) => moment(row.at) },
  { name: 'actor', header: 'Who', value: (row) => row.actor?.name ?? null, cell: (row) => (row.actor === null ? <span className="text-muted">nobody signed in</span> : <Narrow label={`Only what ${row.actor.name} did`} onClick={() => onFilter('actor', row.actor?.id ?? '')}>{row.actor.name}</Narrow>) },
  { name: 'action', header: 'What', value: (row) => row.action, cell: (row) => <Narrow label={`Only ${row.action}`} onClick={() => onFilter('action', row.action)}>{row.action}</Narrow> },
  { name: 'subject', header: 'Of', value: (row) => `${row.subject.kind} ${row.subject.id ?? ''}`, cell: (row) => <>{row.subject.kind}{row.subject.id === null ? null : <> <Narrow label={`Only about ${row.subject.kind} ${row.subject.id}`} onClick={() => onFilter('subject_id', row.subject.id ?? '')}><code className="text-xs">{short(row.subject.id)}</code></Narrow></>}</> },
  { name: 'changes', header: 'Before and after', wrap: true, value: (row) => differences(row.before, row.after).map(({ name, before, after }) => `${name}: ${before ?? ''} -> ${after ?? ''}`).join('; '), cell: (row) => <div className="max-h-48 min-w-64 max-w-xl overflow-y-auto" tabIndex={0} role="group" aria-label="Before and after"><Changes event={row} /></div> },
  { name: 'by', header: 'By', value: (row) => row.key ?? row.session, cell: (row) => <By event={row} onFilter={onFilter} /> },
  { name: 'ip', header: 'From', value: (row) => row.ip, cell: (row) => (row.ip === null ? <span className="text-muted">this machine</span> : <code className="text-xs">{row.ip}</code>) },
  { name: 'request_id', header: 'Request', only: 'copy', value: (row) => row.request_id },
]

/** Audit rows; who, what and by what lead to all rows of the same. */
export function AuditTable({ events, onFilter }: { events: readonly AuditEvent[]; onFilter: Filter }) {
  return <DataTable columns={columnsOf(onFilter)} rows={events} rowKey={(row) => String(row.id)} caption="Audit" hideCaption />
}
