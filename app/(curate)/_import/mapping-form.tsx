'use client'
import { useId, useState, type FormEvent } from 'react'
import type { ImportColumn, ImportReading } from '@/openapi/schemas/import'
import { EVIDENCE } from '../_sheet/columns'
import { choicesOf, DELIMITER_WORDS, mappingFaults, type Reading } from './mapping'

const ENCODINGS = ['utf-8', 'utf-16le', 'utf-16be', 'windows-1252', 'iso-8859-1', 'iso-8859-15', 'macintosh']
/** Values that a file from one paper has the same in every row. */
const SAME = ['species', 'energy_source', 'energy_evidence', 'g_source', 'g_evidence'] as const

function Choice({ label, value, onChange, children }: { label: string; value: string; onChange: (value: string) => void; children: React.ReactNode }) {
  const id = useId()
  return (
    <div>
      <label htmlFor={id} className="label">{label}</label>
      <select id={id} className="input" value={value} onChange={(event) => onChange(event.target.value)}>{children}</select>
    </div>
  )
}

/** Which of the file's columns is which of ours, with what stands in them; suggestions are chosen already. */
export function MappingForm({ found, reading, columns, busy, onRead }: { found: ImportReading; reading: Reading; columns: readonly ImportColumn[]; busy: boolean; onRead: (reading: Reading) => void }) {
  const [mapping, setMapping] = useState<Record<string, string>>(() => choicesOf(found, reading.mapping))
  const [defaults, setDefaults] = useState<Record<string, string>>({ ...reading.defaults })
  const [how, setHow] = useState({ encoding: reading.encoding, delimiter: reading.delimiter, decimal: reading.decimal })
  const { twice, missing } = mappingFaults(mapping, defaults, columns)
  const taken = new Set(Object.values(mapping))
  const submit = (event: FormEvent) => {
    event.preventDefault()
    // a cell that a column of the file gives has no other value for all rows
    onRead({ mapping, defaults: Object.fromEntries(Object.entries(defaults).filter(([name]) => !taken.has(name))), ...how })
  }
  return (
    <form onSubmit={submit} className="space-y-5" aria-label="What the columns are">
      <div className="scroll-x" tabIndex={0} role="region" aria-label="Columns of the file, scrolls sideways">
        <table className="ruled">
          <caption className="sr-only">Columns of the file</caption>
          <thead><tr><th scope="col">In the file</th><th scope="col">First values</th><th scope="col">Read as</th><th scope="col">Remark</th></tr></thead>
          <tbody>
            {found.columns.map((column, index) => (
              <tr key={index}>
                <th scope="row" className="max-w-56 truncate font-medium!">{column.header === '' ? <span className="text-muted">no name</span> : column.header}</th>
                <td className="num max-w-72 truncate text-muted">{column.sample.filter((text) => text !== '').join(' · ')}</td>
                <td>
                  <select aria-label={`${column.header} is read as`} aria-invalid={twice.has(column.header) || undefined} className="input min-h-8 min-w-48 py-0 text-sm" value={mapping[column.header] ?? ''} onChange={(event) => setMapping({ ...mapping, [column.header]: event.target.value })}>
                    <option value="">left out</option>
                    {columns.map(({ name, unit }) => <option key={name} value={name}>{unit === null ? name : `${name} (${unit})`}</option>)}
                  </select>
                </td>
                <td className="wrap note">{twice.has(column.header) ? <span className="text-bad">Another column is read as this too.</span> : mapping[column.header] === column.suggestion && column.field === null && column.suggestion !== null ? 'It looks like this: please check.' : column.note}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      <fieldset className="max-w-4xl">
        <legend className="mb-1 font-medium">The same for every row</legend>
        <p className="note mb-2">For values that the file does not have a column for.</p>
        <div className="grid grid-cols-1 gap-x-4 gap-y-3 sm:grid-cols-2 lg:grid-cols-3">
          {SAME.filter((name) => !taken.has(name)).map((name) => (
            <label key={name} className="block">
              <span className="label"><code>{name}</code></span>
              {name.endsWith('evidence') ? (
                <select className="input" value={defaults[name] ?? ''} onChange={(event) => setDefaults({ ...defaults, [name]: event.target.value })}>
                  <option value="">not said</option>
                  {EVIDENCE.map((one) => <option key={one} value={one}>{one}</option>)}
                </select>
              ) : <input className="input" value={defaults[name] ?? ''} autoComplete="off" maxLength={200} placeholder={name === 'species' ? 'Na-I' : ''} onChange={(event) => setDefaults({ ...defaults, [name]: event.target.value })} />}
            </label>
          ))}
        </div>
      </fieldset>
      <fieldset className="max-w-4xl">
        <legend className="mb-2 font-medium">How the file is written</legend>
        <div className="grid grid-cols-1 gap-x-4 gap-y-3 sm:grid-cols-3">
          <Choice label="Encoding" value={how.encoding} onChange={(encoding) => setHow({ ...how, encoding })}>
            <option value="">as found: {found.encoding}</option>
            {ENCODINGS.map((one) => <option key={one} value={one}>{one}</option>)}
          </Choice>
          <Choice label="Between the cells" value={how.delimiter} onChange={(delimiter) => setHow({ ...how, delimiter })}>
            <option value="">as found: {DELIMITER_WORDS[found.delimiter]}</option>
            {Object.values(DELIMITER_WORDS).map((word) => <option key={word} value={word}>{word}</option>)}
          </Choice>
          <Choice label="Decimal mark" value={how.decimal} onChange={(decimal) => setHow({ ...how, decimal })}>
            <option value="">as found: {found.decimal === '.' ? 'point' : 'comma'}</option>
            <option value=".">point</option>
            <option value=",">comma</option>
          </Choice>
        </div>
      </fieldset>
      {missing.length > 0 ? <p className="text-sm text-warn">Still needed: {missing.map((name, index) => <span key={name}>{index > 0 ? ', ' : ''}<code>{name}</code></span>)}. A file with a column <code>id</code> needs none of them.</p> : null}
      <button type="submit" className="btn btn-lamp" disabled={busy || twice.size > 0}>Read it like this</button>
    </form>
  )
}
