// npm start: serves what prepare.mjs has put in place, and ends everything it started on a signal.
import fs from 'node:fs'
import path from 'node:path'
import { checkListen, database, endServer, keepsMail, mailStandIn, main, releaseDatabase, root, serve, sessionSecret } from './steps.mjs'

const host = process.env.HOST || '127.0.0.1'
const port = process.env.PORT || '3000'
const toldFile = path.join(root, '.data/first-start')

await main(async () => {
  await checkListen(host, port)
  const env = { ...(await database('lodeterm')), SESSION_SECRET_FILE: sessionSecret(process.env.SESSION_SECRET_FILE || '.data/session-secret') }
  let wanted = false
  let serving
  let mail
  const end = async () => {
    if (wanted) return
    wanted = true
    if (serving) await endServer(serving.child)
    if (mail) await endServer(mail.child)
    await releaseDatabase()
    process.exit(0)
  }
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => void end())
  if (keepsMail(host)) mail = await mailStandIn(process.env.OUTBOX_FOLDER || '.data/outbox')
  serving = await serve(host, port, { ...env, OUTBOX_FOLDER: '', ...mail?.env })
  serving.child.once('exit', async (code) => {
    if (wanted) return
    if (mail) await endServer(mail.child)
    await releaseDatabase()
    process.exit(code ?? 1)
  })
  const told = fs.existsSync(toldFile) ? fs.readFileSync(toldFile, 'utf8').trim() : ''
  fs.rmSync(toldFile, { force: true })
  const address = process.env.BASE_URL || serving.base
  process.stdout.write(`
Lodeterm is at ${address}
${told === '' ? '' : `\n${told}\n`}
Try:
  curl '${address}/api/v1/transitions/Na-I.1~Na-I.3/components?field=1.5T'

${mail ? `Mail is not sent but kept: ${address}/outbox\n\n` : ''}Ctrl-C ends it.
`)
})
