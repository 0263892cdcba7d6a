import pino, { type Logger } from 'pino'
import { shared } from '@/lib/access/shared'

/** The process's log: JSON lines on standard output. Keys, cookies and bodies are never given to it. */
export const processLog = (level: string): Logger => shared('log', () => pino({ level, base: { app: 'lodeterm' } }))
