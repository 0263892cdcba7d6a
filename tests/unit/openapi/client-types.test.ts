import fs from 'node:fs'
import { expect, it } from 'vitest'
import { clientTypes, DOCUMENT_FILE, TYPES_FILE } from '@/clients/typescript/generate'

it('the types of the TypeScript client are those of the document (npm run openapi writes both)', () => {
  expect(fs.readFileSync(TYPES_FILE, 'utf8') === clientTypes(fs.readFileSync(DOCUMENT_FILE, 'utf8'))).toBe(true)
})
