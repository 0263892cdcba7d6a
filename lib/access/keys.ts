import { createHash, randomInt } from 'node:crypto'

export const KEY_MARK = 'ldt_'
const ALPHABET = '0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz'
/** 24 characters of 62 make 142 bits. */
const RANDOM_LENGTH = 24
const CHECK_LENGTH = 6
const FORM = new RegExp(`^${KEY_MARK}[0-9A-Za-z]{${RANDOM_LENGTH + CHECK_LENGTH}}$`)

/** The first 32 bits of the SHA-256 of the random part, in base 62: tells a mistyped key from an unknown one without asking anyone. */
function checksum(random: string): string {
  let value = createHash('sha256').update(random).digest().readUInt32BE(0)
  let text = ''
  for (let i = 0; i < CHECK_LENGTH; i += 1) {
    text = (ALPHABET[value % 62] ?? '0') + text
    value = Math.floor(value / 62)
  }
  return text
}

/** SHA-256 of the whole key: all that is kept of it. */
export const keyDigest = (key: string): Buffer => createHash('sha256').update(key).digest()

/** A new key: its text (to be shown once), its digest, and the start by which its owner tells it from others. */
export function mintKey(): { key: string; sha256: Buffer; prefix: string } {
  let random = ''
  for (let i = 0; i < RANDOM_LENGTH; i += 1) random += ALPHABET[randomInt(62)] ?? ''
  const key = `${KEY_MARK}${random}${checksum(random)}`
  return { key, sha256: keyDigest(key), prefix: key.slice(0, KEY_MARK.length + 6) }
}

/** Whether a text has the form of a key and its checksum fits. */
export const isKeyShaped = (text: string): boolean =>
  FORM.test(text) && checksum(text.slice(KEY_MARK.length, KEY_MARK.length + RANDOM_LENGTH)) === text.slice(KEY_MARK.length + RANDOM_LENGTH)
