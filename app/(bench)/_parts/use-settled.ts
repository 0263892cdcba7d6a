'use client'
import { useEffect, useState } from 'react'

/** The value once it has stayed the same for `ms`: what is asked of the server while a slider moves. */
export function useSettled<V>(value: V, ms = 350): V {
  const [settled, setSettled] = useState(value)
  useEffect(() => {
    const timer = setTimeout(() => setSettled(value), ms)
    return () => clearTimeout(timer)
  }, [value, ms])
  return settled
}
