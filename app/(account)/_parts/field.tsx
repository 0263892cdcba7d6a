import { useId, type InputHTMLAttributes } from 'react'

/** A labelled input with its own error beneath, tied to it for screen readers. */
export function Field({ label, hint, error, ...rest }: { label: string; hint?: string; error?: string } & InputHTMLAttributes<HTMLInputElement>) {
  const id = useId()
  const note = error ?? hint
  return (
    <div>
      <label htmlFor={id} className="label">{label}</label>
      <input id={id} className="input" aria-invalid={error ? true : undefined} aria-describedby={note ? `${id}-note` : undefined} {...rest} />
      {note ? <p id={`${id}-note`} className={error ? 'mt-1 text-sm text-bad' : 'note mt-1'}>{note}</p> : null}
    </div>
  )
}
