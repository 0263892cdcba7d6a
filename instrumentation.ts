/** Runs once when a server process starts, before it answers anyone. */
export async function register(): Promise<void> {
  if (process.env.NEXT_RUNTIME === 'nodejs') {
    const { watchPeers } = await import('@/lib/http/peer')
    watchPeers()
  }
}
