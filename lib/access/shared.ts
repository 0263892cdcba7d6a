const holder = globalThis as unknown as Record<symbol, unknown>

/**
 * One value per process. A server's bundles may each hold a copy of a module, so what must be one
 * (a cache, a limiter) is kept on globalThis under a name.
 */
export function shared<T>(name: string, make: () => T): T {
  const slot = Symbol.for(`lodeterm.${name}`)
  holder[slot] ??= make()
  return holder[slot] as T
}

export function forgetShared(name: string): void {
  holder[Symbol.for(`lodeterm.${name}`)] = undefined
}
