import { Fragment, type ReactNode } from 'react'
import { TermSymbol } from './term-symbol'

const SHELL = /^(\d+)([a-z])(\d*)$/

function Part({ text }: { text: string }): ReactNode {
  const shell = SHELL.exec(text)
  if (shell) {
    return (
      <>
        {shell[1]}
        <i className="not-italic">{shell[2]}</i>
        {shell[3] ? <sup>{shell[3]}</sup> : null}
      </>
    )
  }
  const parent = /^\((.+)\)$/.exec(text)
  if (parent?.[1]) {
    return (
      <>
        (<TermSymbol term={parent[1]} className="text-[1em]!" />)
      </>
    )
  }
  return text
}

/** A configuration in canonical text (`3d6.(5D).4s.4p.(3P*)`), set with raised counts and thin spaces between shells. */
export function Configuration({ text, className = '' }: { text: string; className?: string }) {
  const parts = text.split('.')
  return (
    <span className={`symbol ${className}`}>
      {parts.map((part, index) => (
        <Fragment key={index}>
          {index > 0 ? '\u2009' : null}
          <Part text={part} />
        </Fragment>
      ))}
    </span>
  )
}
