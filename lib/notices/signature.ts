import { createHmac, randomBytes } from 'node:crypto'

/** A webhook's secret: the key of its HMAC, as text. */
export const mintSecret = (): string => `ldw_${randomBytes(32).toString('base64url')}`

/** `v1=` and the hexadecimal HMAC-SHA256 of `timestamp.body`: the time is signed along, so that an old request cannot be sent again. */
export const signatureOf = (secret: string, timestamp: number, body: string): string => `v1=${createHmac('sha256', secret).update(`${timestamp}.${body}`).digest('hex')}`

/** The fields that every delivery carries. */
export const deliveryFields = (given: { id: string; event: string; body: string; secret: string; at: Date }): Record<string, string> => {
  const timestamp = Math.floor(given.at.getTime() / 1000)
  return {
    'content-type': 'application/json; charset=utf-8', 'user-agent': 'Lodeterm-Webhook/1', 'lodeterm-delivery': given.id, 'lodeterm-event': given.event,
    'lodeterm-timestamp': String(timestamp), 'lodeterm-signature': signatureOf(given.secret, timestamp, given.body),
  }
}
