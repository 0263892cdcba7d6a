import { expect } from 'vitest'
import { get, type Json } from './client'
import { makePerson, signIn } from './people'

let admin: Promise<string> | undefined
const adminCookie = (): Promise<string> => (admin ??= makePerson('admin').then((person) => signIn(person)))

/** Mail that the stand-in took for an address, the newest first. */
export async function mailTo(address: string): Promise<Json[]> {
  const reply = await get('/outbox?limit=200', { cookie: await adminCookie() })
  return (reply.json.data as Json[]).filter((mail: Json) => (mail.to as string[]).includes(address))
}

/** Waits for mail to an address whose subject holds a text. */
export async function nextMail(address: string, subject: string): Promise<Json> {
  let found: Json
  await expect.poll(async () => (found = (await mailTo(address)).find((mail) => String(mail.subject).includes(subject))), { timeout: 10_000, interval: 100, message: `mail "${subject}" to ${address}` }).toBeDefined()
  return found
}

export const tokenIn = (mail: Json): string => /[?&]token=([\w-]{43})/.exec(String(mail.text))?.[1] ?? ''
