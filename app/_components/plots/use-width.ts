'use client'
import { useEffect, useRef, useState, type RefObject } from 'react'

/** The width in px of an element, followed as it changes; `initial` until it has been measured. */
export function useWidth<E extends HTMLElement>(initial: number): [RefObject<E | null>, number] {
  const element = useRef<E>(null)
  const [width, setWidth] = useState(initial)
  useEffect(() => {
    const target = element.current
    if (!target) return
    const observer = new ResizeObserver(([entry]) => {
      if (entry && entry.contentRect.width > 0) setWidth(Math.round(entry.contentRect.width))
    })
    observer.observe(target)
    return () => observer.disconnect()
  }, [])
  return [element, width]
}
