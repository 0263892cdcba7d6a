import fs from 'node:fs/promises'
import path from 'node:path'
import { OutboxMail } from '@/openapi/schemas/notices'

const NAME = /^\d{13}-[0-9a-f]{8}\.json$/

/** Names of the mails that the local stand-in keeps, the newest first; a folder that is not there yet is empty. */
export async function outboxNames(folder: string): Promise<string[]> {
  const names = await fs.readdir(/* turbopackIgnore: true */ folder).catch(() => [] as string[])
  return names.filter((name) => NAME.test(name)).sort().reverse().map((name) => name.slice(0, -'.json'.length))
}

/** One of them; null where it was tidied away meanwhile. */
export async function readOutboxMail(folder: string, id: string): Promise<OutboxMail | null> {
  try {
    return OutboxMail.parse(JSON.parse(await fs.readFile(/* turbopackIgnore: true */ path.join(folder, `${id}.json`), 'utf8')))
  } catch {
    return null
  }
}
