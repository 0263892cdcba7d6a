import { isUtf8 } from 'node:buffer'
import { analyse } from 'chardet'
import { quoted } from '@/lib/units/number'
import { refused } from './refusal'

/** Bytes of a file made into UTF-8, a slice at a time, so that a file of another encoding need not stand in memory twice. */
export interface Decoding { encoding: string; slices: () => Generator<Buffer> }

const SLICE = 256 * 1024
/** How much of a file is looked at to guess how it is encoded. */
const SAMPLE = 64 * 1024
/** How sure a guess of something rarer than windows-1252 must be: short texts with a few accents look like much. */
const SURE = 80

/** The mark at the beginning of the file that says how it is encoded. */
function mark(bytes: Buffer): { encoding: string; length: number } | null {
  if (bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf) return { encoding: 'utf-8', length: 3 }
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return { encoding: 'utf-16le', length: 2 }
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return { encoding: 'utf-16be', length: 2 }
  return null
}

/** UTF-16 without a mark shows by every other byte of plain text being 0. */
function unmarkedUtf16(bytes: Buffer): string | null {
  const sample = bytes.subarray(0, 4096)
  const zeros = [0, 0]
  for (let i = 0; i < sample.byteLength; i += 1) if (sample[i] === 0) zeros[i % 2] = (zeros[i % 2] ?? 0) + 1
  const [even = 0, odd = 0] = zeros
  const most = sample.byteLength / 2
  return odd > 0.6 * most && even < 0.1 * most ? 'utf-16le' : even > 0.6 * most && odd < 0.1 * most ? 'utf-16be' : null
}

/** A sample around the first byte that is not ASCII: the beginning alone may be plain. */
function tellingSample(bytes: Buffer): Buffer {
  const first = bytes.findIndex((byte) => byte > 127)
  const from = Math.max(0, first - SAMPLE / 4)
  return bytes.subarray(from, from + SAMPLE)
}

/** windows-1252 unless another encoding is nearly certain. */
function guessed(bytes: Buffer): string {
  const guesses = analyse(tellingSample(bytes))
  const [best] = guesses
  if (best === undefined || best.confidence < SURE || /^(ISO-8859-1|windows-1252|UTF-8|ASCII)$/i.test(best.name)) return 'windows-1252'
  try {
    return new TextDecoder(best.name).encoding
  } catch {
    return 'windows-1252'
  }
}

const known = (label: string): string | null => {
  try {
    return new TextDecoder(label.trim()).encoding
  } catch {
    return null
  }
}

function* slicesOf(bytes: Buffer): Generator<Buffer> {
  for (let at = 0; at < bytes.byteLength; at += SLICE) yield bytes.subarray(at, at + SLICE)
}

const mismatch = (encoding: string) => refused('encoding_mismatch', `The file is not valid ${encoding}: leave the encoding to be found out, or name the right one.`)

function* recoded(bytes: Buffer, encoding: string): Generator<Buffer> {
  const decoder = new TextDecoder(encoding, { fatal: true, ignoreBOM: true })
  try {
    for (const slice of slicesOf(bytes)) yield Buffer.from(decoder.decode(slice, { stream: true }))
    yield Buffer.from(decoder.decode())
  } catch (error) {
    throw error instanceof TypeError ? mismatch(encoding) : error
  }
}

/** How a file is encoded, as asked or as found out. What cannot be decoded so shows when the slices are taken. */
export function decodingOf(bytes: Buffer, asked: string | undefined): Decoding {
  const stated = asked === undefined ? undefined : known(asked)
  if (stated === null) throw refused('encoding_unknown', `${quoted(asked ?? '')} is no encoding known here; usual ones are utf-8, utf-16le, utf-16be and windows-1252.`)
  const marked = mark(bytes)
  const encoding = stated ?? marked?.encoding ?? unmarkedUtf16(bytes) ?? (isUtf8(bytes) ? 'utf-8' : guessed(bytes))
  const content = marked !== null && marked.encoding === encoding ? bytes.subarray(marked.length) : bytes
  if (encoding !== 'utf-8') return { encoding, slices: () => recoded(content, encoding) }
  if (!isUtf8(content)) throw mismatch(encoding)
  return { encoding, slices: () => slicesOf(content) }
}
