'use client'
import { useSyncExternalStore } from 'react'

const never = () => () => undefined

/** Plain text in which addresses of this site are links; all others stay text, whoever wrote them. */
export function LinkedText({ text }: { text: string }) {
  const origin = useSyncExternalStore(never, () => window.location.origin, () => '')
  if (origin === '') return text
  return text.split(/(https?:\/\/[^\s<>"]+)/).map((part, index) => {
    if (index % 2 === 0) return part
    const own = part === origin || part.startsWith(`${origin}/`)
    return own ? <a key={index} className="link" href={part}>{part}</a> : part
  })
}
