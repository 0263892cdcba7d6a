import { randomBytes } from 'node:crypto'
import fs from 'node:fs'
import path from 'node:path'
import { getConfig } from '@/lib/config'
import { shared } from '@/lib/access/shared'

function readOrMake(file: string): Buffer {
  try {
    const text = fs.readFileSync(file, 'utf8').trim()
    const secret = Buffer.from(text, 'base64url')
    if (secret.length < 32) throw new Error(`${file} does not hold a secret of at least 32 bytes; remove it to have a new one made (everyone is then signed out)`)
    return secret
  } catch (error) {
    if (!(error instanceof Error && 'code' in error && error.code === 'ENOENT')) throw error
  }
  fs.mkdirSync(path.dirname(file), { recursive: true, mode: 0o700 })
  const draft = `${file}.${process.pid}.${randomBytes(4).toString('hex')}`
  fs.writeFileSync(draft, `${randomBytes(48).toString('base64url')}\n`, { mode: 0o600, flag: 'wx' })
  try {
    // link fails where another process was faster, and then its secret is the one
    fs.linkSync(draft, file)
  } catch (error) {
    if (!(error instanceof Error && 'code' in error && error.code === 'EEXIST')) throw error
  } finally {
    fs.rmSync(draft, { force: true })
  }
  return readOrMake(file)
}

/** The secret that signs session cookies and cursors, from a private file (mode 0600) that is made when missing. */
export const sessionSecret = (): Buffer => shared('secret', () => readOrMake(getConfig().sessionSecretFile))
