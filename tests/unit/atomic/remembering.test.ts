import { describe, expect, it } from 'vitest'
import { remembering } from '@/lib/atomic/remembering'

/** Asks for a key and tells whether it had to be made. */
const asking = <T>(memory: (key: string, make: () => T) => T) => (key: string, value: T): boolean => {
  let made = false
  memory(key, () => {
    made = true
    return value
  })
  return made
}

describe('what is remembered', () => {
  it('is made once, and all anew beyond the most', () => {
    const makes = asking(remembering<number>(2))
    expect(['a', 'a', 'b', 'a', 'c', 'a'].map((key) => makes(key, 1))).toEqual([true, false, true, false, true, true])
  })

  it('counts by weight where things differ in size: few large ones are as much as many small ones', () => {
    const makes = asking(remembering<number>(10, (size) => size))
    expect(makes('small', 2)).toBe(true)
    expect(makes('large', 8)).toBe(true)
    expect([makes('small', 2), makes('large', 8)]).toEqual([false, false])
    expect(makes('larger', 9)).toBe(true)
    expect([makes('larger', 9), makes('small', 2)]).toEqual([false, true])
  })

  it('keeps what is too large alone until something else comes', () => {
    const makes = asking(remembering<number>(10, (size) => size))
    expect([makes('huge', 50), makes('huge', 50), makes('small', 1), makes('huge', 50)]).toEqual([true, false, true, true])
  })
})
