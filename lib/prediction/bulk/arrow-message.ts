import type { Schema } from 'apache-arrow'
import { BufferRegion, FieldNode, Message, RecordBatch } from 'apache-arrow/ipc/metadata/message'

/** Bytes of a buffer with the padding to a multiple of 8 that Arrow asks for. */
export const padded = (bytes: number): number => Math.ceil(bytes / 8) * 8

/** A message of the IPC stream: continuation mark, length, metadata padded to a multiple of 8. */
function framed(message: Message): Uint8Array {
  const metadata = Message.encode(message)
  const length = padded(metadata.byteLength)
  const whole = new Uint8Array(8 + length)
  const view = new DataView(whole.buffer)
  view.setInt32(0, -1, true)
  view.setInt32(4, length, true)
  whole.set(metadata, 8)
  return whole
}

export const schemaMessage = (schema: Schema): Uint8Array => framed(Message.from(schema) as Message)

/** A column's node and the sizes of its buffers, in the order of the format. */
export interface NodePlan {
  length: number
  nulls: number
  /** Unpadded sizes; 0 for a validity bitmap that is not needed. */
  buffers: number[]
}

/** The head of a record batch whose body follows, buffer after buffer, each padded; so the body need never stand in memory as one. */
export function batchMessage(rows: number, plans: readonly NodePlan[], metadata: Map<string, string>): Uint8Array {
  const regions: BufferRegion[] = []
  let offset = 0
  for (const bytes of plans.flatMap((plan) => plan.buffers)) {
    regions.push(new BufferRegion(offset, bytes))
    offset += padded(bytes)
  }
  const nodes = plans.map((plan) => new FieldNode(plan.length, plan.nulls))
  const header = new RecordBatch(rows, nodes, regions, null, [], metadata)
  return framed(Message.from(header, offset) as Message)
}

/** The end of the stream. */
export const endMark = (): Uint8Array => new Uint8Array(Int32Array.of(-1, 0).buffer)

/** A validity bitmap: least significant bit first, 1 where there is a value. */
export function bitmap(length: number, valid: (i: number) => boolean): Uint8Array {
  const bits = new Uint8Array(Math.ceil(length / 8))
  for (let i = 0; i < length; i += 1) if (valid(i)) bits[i >> 3] = (bits[i >> 3] as number) | (1 << (i & 7))
  return bits
}
