'use client'
import { FileUp } from 'lucide-react'
import { useId, useState } from 'react'

/** A place to drop a file, and a button for those who choose one. */
export function FileDrop({ onFile, disabled }: { onFile: (file: File) => void; disabled: boolean }) {
  const id = useId()
  const [over, setOver] = useState(false)
  const take = (files: FileList | null) => { const file = files?.[0]; if (file && !disabled) onFile(file) }
  return (
    <div
      onDragOver={(event) => { event.preventDefault(); setOver(true) }} onDragLeave={() => setOver(false)}
      onDrop={(event) => { event.preventDefault(); setOver(false); take(event.dataTransfer.files) }}
      className={`flex max-w-3xl flex-wrap items-center gap-x-5 gap-y-3 border border-dashed p-5 ${over ? 'border-lamp bg-lamp-wash' : 'border-rule-strong bg-sheet'}`}
    >
      <FileUp size={26} aria-hidden="true" className="text-muted" />
      <div className="min-w-0 flex-1 basis-60">
        <label htmlFor={id} className="font-medium">Table of levels</label>
        <p className="note">CSV or TSV with a header row, at most 100 000 rows and 64 MB. Drop it here or choose it.</p>
      </div>
      <input id={id} type="file" accept=".csv,.tsv,.txt,.dat,text/csv,text/tab-separated-values,text/plain" disabled={disabled}
        className="max-w-full text-sm file:mr-3 file:min-h-9 file:cursor-pointer file:rounded-sm file:border file:border-solid file:border-rule-strong file:bg-paper file:px-3 file:font-medium file:text-ink hover:file:border-lamp" onChange={(event) => { take(event.target.files); event.target.value = '' }} />
    </div>
  )
}
