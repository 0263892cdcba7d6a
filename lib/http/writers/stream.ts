const encoder = new TextEncoder()

/** Pieces up to this many bytes or characters together are sent whole, with a length; longer answers are streamed. */
const WHOLE = 256 * 1024
const PIECE = 32 * 1024

/** Joins small strings into pieces worth a write of their own. */
function* inPieces(parts: Iterable<string>): Generator<string> {
  let piece = ''
  for (const part of parts) {
    piece += part
    if (piece.length >= PIECE) {
      yield piece
      piece = ''
    }
  }
  if (piece !== '') yield piece
}

/** A stream that asks for the next piece only when the last was taken, so that memory stays flat however long the answer is. */
function pulled(first: readonly Uint8Array[], rest: Iterator<Uint8Array>): ReadableStream<Uint8Array> {
  const waiting = [...first]
  return new ReadableStream<Uint8Array>(
    {
      pull(controller) {
        const next = waiting.shift()
        if (next) return controller.enqueue(next)
        const step = rest.next()
        if (step.done) return controller.close()
        controller.enqueue(step.value)
      },
      cancel() {
        rest.return?.()
      },
    },
    { highWaterMark: 1 },
  )
}

/** Text as one string while it is short, else as a stream. */
export function textBody(parts: Iterable<string>): string | ReadableStream<Uint8Array> {
  const pieces = inPieces(parts)[Symbol.iterator]()
  const held: string[] = []
  let length = 0
  while (length < WHOLE) {
    const step = pieces.next()
    if (step.done) return held.join('')
    held.push(step.value)
    length += step.value.length
  }
  const rest: Iterator<Uint8Array> = {
    next: () => {
      const step = pieces.next()
      return step.done ? { done: true, value: undefined } : { done: false, value: encoder.encode(step.value) }
    },
    return: () => {
      pieces.return?.(undefined)
      return { done: true, value: undefined }
    },
  }
  return pulled(held.map((piece) => encoder.encode(piece)), rest)
}

/** Bytes as one array while they are few, else as a stream. */
export function bytesBody(parts: Iterable<Uint8Array>): Uint8Array<ArrayBuffer> | ReadableStream<Uint8Array> {
  const pieces = parts[Symbol.iterator]()
  const held: Uint8Array[] = []
  let length = 0
  while (length < WHOLE) {
    const step = pieces.next()
    if (step.done) return joined(held, length)
    held.push(step.value)
    length += step.value.byteLength
  }
  return pulled(held, pieces)
}

function joined(parts: readonly Uint8Array[], length: number): Uint8Array<ArrayBuffer> {
  const whole = new Uint8Array(length)
  let at = 0
  for (const part of parts) {
    whole.set(part, at)
    at += part.byteLength
  }
  return whole
}

/** Text that comes in time, such as from a database, as a stream: a piece is asked for when the last was taken. */
export function streamedText(parts: AsyncIterable<string>): ReadableStream<Uint8Array> {
  const pieces = parts[Symbol.asyncIterator]()
  return new ReadableStream<Uint8Array>(
    {
      async pull(controller) {
        const step = await pieces.next()
        if (step.done) return controller.close()
        controller.enqueue(encoder.encode(step.value))
      },
      async cancel() {
        await pieces.return?.()
      },
    },
    { highWaterMark: 1 },
  )
}
