'use client'
import { useEffect, useState } from 'react'

/** A value once it has stood still for a while: for what is too heavy to follow a drag at all, such as long tables. */
export function useResting<T>(value: T, ms = 200): T {
  const [rested, setRested] = useState(value)
  useEffect(() => {
    const timer = setTimeout(() => setRested(value), ms)
    return () => clearTimeout(timer)
  }, [value, ms])
  return rested
}
