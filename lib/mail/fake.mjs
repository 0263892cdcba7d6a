// A stand-in for a mail server, on loopback: it takes every mail and keeps it as a file in the folder given, instead of sending it.
// Prints its port when it listens, and ends with whoever started it (when its standard input closes).
import { randomBytes } from 'node:crypto'
import fs from 'node:fs'
import path from 'node:path'
import { simpleParser } from 'mailparser'
import { SMTPServer } from 'smtp-server'

const MOST_KEPT = 500
const LARGEST = 1_000_000

const folder = path.resolve(process.argv[2] ?? '.data/outbox')
fs.mkdirSync(folder, { recursive: true, mode: 0o700 })

/** Whole or not at all: a reader never sees half a mail. */
function keep(mail) {
  const id = `${String(Date.now()).padStart(13, '0')}-${randomBytes(4).toString('hex')}`
  const draft = path.join(folder, `.${id}`)
  fs.writeFileSync(draft, JSON.stringify({ id, ...mail }), { mode: 0o600 })
  fs.renameSync(draft, path.join(folder, `${id}.json`))
  const kept = fs.readdirSync(folder).filter((name) => name.endsWith('.json')).sort()
  for (const old of kept.slice(0, Math.max(0, kept.length - MOST_KEPT))) fs.rmSync(path.join(folder, old), { force: true })
}

const server = new SMTPServer({
  disabledCommands: ['AUTH', 'STARTTLS'],
  disableReverseLookup: true,
  size: LARGEST,
  logger: false,
  onData(stream, session, done) {
    simpleParser(stream, { skipImageLinks: true, skipHtmlToText: true })
      .then((mail) => {
        if (stream.sizeExceeded) throw Object.assign(new Error('too large'), { responseCode: 552 })
        keep({
          at: new Date().toISOString(),
          from: mail.from?.text ?? '',
          // those it is delivered to, whatever its head says
          to: session.envelope.rcptTo.map(({ address }) => address),
          subject: mail.subject ?? '',
          text: mail.text ?? '',
        })
        done()
      })
      .catch(done)
  },
})
server.on('error', () => undefined)
server.listen(0, '127.0.0.1', () => process.stdout.write(`${server.server.address().port}\n`))

const end = () => {
  server.close(() => process.exit(0))
  setTimeout(() => process.exit(0), 500).unref()
}
process.stdin.resume().on('end', end).on('error', end)
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, end)
