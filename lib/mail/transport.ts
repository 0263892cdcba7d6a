import { createTransport, type Transporter } from 'nodemailer'
import { getConfig } from '@/lib/config'

export interface OutgoingMail { to: string; subject: string; text: string }

// On globalThis: the server's bundles may each hold a copy of this module, and they should share their connections.
const holder: { [key: symbol]: Transporter | undefined } = globalThis as never
const slot = Symbol.for('lodeterm.mail')

function transporter(url: string): Transporter {
  return (holder[slot] ??= createTransport(
    { url, pool: true, maxConnections: 2, connectionTimeout: 10_000, greetingTimeout: 10_000, socketTimeout: 30_000, disableFileAccess: true, disableUrlAccess: true } as never,
  ))
}

/** Whether there is a mail server to hand mail to. */
export const canSend = (): boolean => getConfig().smtpUrl !== undefined

/** Hands one mail to the mail server; rejects where that does not take it. Nobody is asked to answer it by a machine. */
export async function sendMail(mail: OutgoingMail): Promise<void> {
  const { smtpUrl, mailFrom } = getConfig()
  if (smtpUrl === undefined) throw new Error('No mail server is set: SMTP_URL')
  await transporter(smtpUrl).sendMail({
    from: mailFrom, to: { name: '', address: mail.to }, subject: mail.subject, text: mail.text,
    headers: { 'Auto-Submitted': 'auto-generated', 'X-Auto-Response-Suppress': 'All' },
  })
}

/** What may be written down of a failure: the server's code and the kind of step, nothing that was sent. */
export function failureOf(error: unknown): string {
  if (!(error instanceof Error)) return 'the mail could not be sent'
  const { code, responseCode, command } = error as Error & { code?: string; responseCode?: number; command?: string }
  return [code ?? error.name, responseCode, command].filter((part) => part !== undefined).join(' ').slice(0, 200)
}
