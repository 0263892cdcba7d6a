import path from 'node:path'
import { defineConfig } from 'vitest/config'

// vitest sets BASE_URL to a path; the project means an address by it.
const plain = { environment: 'node', env: { BASE_URL: '' }, testTimeout: 30_000, sequence: { groupOrder: 0 } } as const
// What is polled for may take its time on a machine that has much to do: where it comes at once, nothing waits longer.
const applied = { setupFiles: ['tests/support/apply-environment.ts'], fileParallelism: false, testTimeout: 60_000, hookTimeout: 120_000, expect: { poll: { timeout: 15_000 } } }
const served = { ...applied, globalSetup: ['tests/support/served.ts'] }
// Files that have a table of their own, or only look: two at a time, since each waits for its browser or its server half of the time.
const beside = { ...served, fileParallelism: true, maxWorkers: 2, testTimeout: 120_000, sequence: { groupOrder: 4 } }

// One group after the other: what asks a server or drives a browser should not wait behind physics.
export default defineConfig({
  resolve: { alias: { '@': path.resolve(import.meta.dirname) } },
  test: {
    projects: [
      { extends: true, test: { name: 'unit', include: ['tests/unit/**/*.test.ts'], ...plain } },
      { extends: true, test: { name: 'reference', include: ['tests/reference/**/*.test.ts'], ...plain } },
      { extends: true, test: { name: 'database', include: ['tests/database/**/*.test.ts'], globalSetup: ['tests/support/database.ts'], ...applied, sequence: { groupOrder: 1 } } },
      { extends: true, test: { name: 'api', include: ['tests/api/**/*.test.ts'], ...served, sequence: { groupOrder: 2 } } },
      { extends: true, test: { name: 'clients', include: ['tests/clients/**/*.test.ts'], ...served, sequence: { groupOrder: 6 } } },
      { extends: true, test: { name: 'faults', include: ['tests/faults/**/*.test.ts'], ...served, testTimeout: 300_000, sequence: { groupOrder: 3 } } },
      { extends: true, test: { name: 'instance', include: ['tests/instance/**/*.test.ts'], ...beside } },
      { extends: true, test: { name: 'browser', include: ['tests/browser/**/*.test.ts'], ...beside } },
    ],
  },
})
