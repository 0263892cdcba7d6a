/** Runs once when a server process starts, before it answers anyone. */
export async function register(): Promise<void> {
  if (process.env.NEXT_RUNTIME === 'nodejs') {
    const { watchPeers } = await import('@/lib/http/peer')
    watchPeers()
    if (process.env.NEXT_PHASE === 'phase-production-build') return
    const [{ startNotices }, { processLog }, { getConfig }] = await Promise.all([import('@/lib/notices/loop'), import('@/lib/http/log'), import('@/lib/config')])
    if (getConfig().smtpUrl === undefined) processLog(getConfig().logLevel).warn('SMTP_URL is not set: mail is written down and waits until a mail server is named')
    startNotices((reason) => processLog(getConfig().logLevel).error({ reason }, 'notices could not be spread'))
  }
}
