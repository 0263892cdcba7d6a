// What the bulk bench asks the server with: whole answers, timed with their decoding, and a load that never ends.
import http from 'node:http'
import { RecordBatchReader } from 'apache-arrow'

/** The bytes of one answer, and the time until its last byte and until it was decoded. */
export function askWhole(base, path, body, key, decode, onBytes = () => undefined) {
  const url = new URL(path, base)
  const text = JSON.stringify(body)
  return new Promise((resolve, reject) => {
    const from = performance.now()
    const request = http.request(url, { method: 'POST', headers: { 'content-type': 'application/json', 'content-length': Buffer.byteLength(text), ...(key === undefined ? {} : { authorization: `Bearer ${key}` }) } }, (response) => {
      const pieces = []
      let length = 0
      response.on('data', (piece) => {
        if (decode !== null) pieces.push(piece)
        length += piece.byteLength
        onBytes(length)
      })
      response.on('error', reject)
      response.on('end', () => {
        if (response.statusCode !== 200) return reject(new Error(`${path} answered ${response.statusCode}: ${Buffer.concat(pieces).toString().slice(0, 500)}`))
        const decoded = decode === null ? null : decode(pieces, length)
        resolve({ ms: performance.now() - from, bytes: length, decoded })
      })
    })
    request.on('error', reject)
    request.end(text)
  })
}

/** Every list column of every batch as one array of doubles, without a copy where the bytes lie well. */
export function decodeArrow(pieces, length) {
  const whole = new Uint8Array(length)
  let at = 0
  for (const piece of pieces) {
    whole.set(piece, at)
    at += piece.byteLength
  }
  let numbers = 0
  for (const batch of RecordBatchReader.from(whole)) {
    for (const name of ['value', 'derivative', 'strength']) {
      const values = batch.getChild(name)?.data[0]?.children[0]?.values
      if (values !== undefined) numbers += values.length
    }
  }
  return { numbers }
}

export function decodeJson(pieces) {
  const { data } = JSON.parse(Buffer.concat(pieces).toString())
  const count = (rows) => (rows ?? []).reduce((sum, row) => sum + (Array.isArray(row) ? row.length : 1), 0)
  return { numbers: data.reduce((sum, block) => sum + count(block.values) + count(block.derivatives) + count(block.strengths), 0) }
}

// run by itself: asks one large answer after the other until it is ended
if (process.argv[2] === 'load') {
  const [base, key, body] = [process.env.BENCH_BASE, process.env.BENCH_KEY, JSON.parse(process.env.BENCH_BODY)]
  let said = false
  for (;;) {
    await askWhole(base, '/api/v1/predictions?format=arrow', body, key, null, () => {
      if (!said) process.stdout.write('begun\n')
      said = true
    })
  }
}
