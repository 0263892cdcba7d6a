import type { Config } from 'tailwindcss'

// Colours and type are CSS variables set per theme in app/globals.css; the names here are the only way to use them.
const config: Config = {
  content: ['./app/**/*.{ts,tsx}'],
  darkMode: ['selector', '[data-theme="dark"]'],
  theme: {
    extend: {
      colors: {
        paper: 'var(--paper)',
        sheet: 'var(--sheet)',
        well: 'var(--well)',
        ink: 'var(--ink)',
        muted: 'var(--muted)',
        rule: 'var(--rule)',
        'rule-strong': 'var(--rule-strong)',
        lamp: 'var(--lamp)',
        'lamp-ink': 'var(--lamp-ink)',
        'lamp-wash': 'var(--lamp-wash)',
        pi: 'var(--pi)',
        'sigma-plus': 'var(--sigma-plus)',
        'sigma-minus': 'var(--sigma-minus)',
        good: 'var(--good)',
        warn: 'var(--warn)',
        bad: 'var(--bad)',
      },
      fontFamily: {
        text: ['STIX Two Text Variable', 'STIX Two Text', 'Georgia', 'serif'],
        sans: ['Inter Variable', 'Inter', 'system-ui', 'sans-serif'],
        mono: ['JetBrains Mono Variable', 'ui-monospace', 'monospace'],
      },
    },
  },
}
export default config
