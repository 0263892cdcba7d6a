'use client'
import { Monitor, Moon, Sun } from 'lucide-react'
import { useTheme } from 'next-themes'
import { useSyncExternalStore } from 'react'

const NEXT: Record<string, string> = { system: 'light', light: 'dark', dark: 'system' }
const WORD: Record<string, string> = { system: 'as the system', light: 'light', dark: 'dark' }
const never = () => () => undefined

/** One button that goes round: as the system, light, dark. */
export function ThemeSwitch() {
  const { theme = 'system', setTheme } = useTheme()
  const mounted = useSyncExternalStore(never, () => true, () => false)
  const now = mounted ? theme : 'system'
  const Icon = now === 'dark' ? Moon : now === 'light' ? Sun : Monitor
  return (
    <button type="button" className="btn btn-quiet btn-small min-h-8 min-w-8 px-1.5" onClick={() => setTheme(NEXT[now] ?? 'system')}
      aria-label={`Theme: ${WORD[now]}. Change it`} title={`Theme: ${WORD[now]}`}>
      <Icon size={17} aria-hidden="true" />
    </button>
  )
}
