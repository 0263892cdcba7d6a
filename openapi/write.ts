import fs from 'node:fs'
import path from 'node:path'
import { fileURLToPath } from 'node:url'
import { OPERATIONS } from '@/openapi'
import { documentText } from '@/openapi/core/registry'

const file = path.join(path.dirname(fileURLToPath(import.meta.url)), 'openapi.json')
fs.writeFileSync(file, documentText(OPERATIONS))
process.stderr.write(`${OPERATIONS.length} operations written to ${path.basename(file)}\n`)
