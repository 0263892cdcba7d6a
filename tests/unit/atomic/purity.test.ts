import { readdirSync, readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'

const rooms = ['atomic', 'units'] as const

describe('the physics runs anywhere', () => {
  it.each(rooms)('lib/%s imports nothing but lib/atomic, lib/units and fraction.js', (room) => {
    const folder = fileURLToPath(new URL(`../../../lib/${room}/`, import.meta.url))
    const files = readdirSync(folder).filter((name) => name.endsWith('.ts'))
    expect(files.length).toBeGreaterThan(5)
    for (const file of files) {
      const source = readFileSync(`${folder}${file}`, 'utf8')
      for (const [, from = ''] of source.matchAll(/from '([^']+)'/g)) {
        const allowed = from.startsWith('@/lib/units/') || (room === 'atomic' && (from.startsWith('@/lib/atomic/') || from === 'fraction.js'))
        expect(allowed, `${room}/${file} imports ${from}`).toBe(true)
      }
      expect(source, file).not.toMatch(/\b(process\.|Buffer\.|window\.|document\.|require\()/)
      expect(source.split('\n').length, file).toBeLessThanOrEqual(400)
    }
  })
})
