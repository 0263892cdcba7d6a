import Link from 'next/link'
import { plateLines } from './plate-lines'

const FROM = 380
const TO = 780
const STEP = 50
const LANDMARKS = [
  { nm: 393.366, text: 'Ca K' }, { nm: 486.133, text: 'Hβ' }, { nm: 517.27, text: 'Mg b' }, { nm: 546.074, text: 'Hg' }, { nm: 589.3, text: 'Na D' }, { nm: 656.28, text: 'Hα' }, { nm: 766.49, text: 'K' },
]
const at = (nm: number): number => ((nm - FROM) / (TO - FROM)) * 1000
const share = (nm: number): string => `${((nm - FROM) / (TO - FROM)) * 100}%`

const TICKS = Array.from({ length: (TO - FROM) / 5 + 1 }, (_, index) => FROM + index * 5).map((nm) => `M${at(nm)} 0v${nm % 50 === 0 ? 10 : nm % 10 === 0 ? 6 : 3}`).join('')

/**
 * The visible lines of the edition as a spectrograph's plate would hold them, over a ruled scale. All are drawn
 * alike: the table holds no intensities. Each stretch of the plate is a link to its lines.
 */
export async function Plate({ edition }: { edition: number | undefined }) {
  const lines = await plateLines(edition, FROM, TO)
  if (lines.length === 0) return null
  const windows = Array.from({ length: Math.ceil((TO - FROM) / STEP) }, (_, index) => {
    const from = FROM + index * STEP
    return { from, to: Math.min(TO, from + STEP) }
  })
  const pin = edition === undefined ? '' : `&edition=${edition}`
  return (
    <figure className="mt-9 sm:mt-12">
      <div className="relative">
        <svg viewBox="0 0 1000 100" preserveAspectRatio="none" className="plate-lines block h-24 w-full bg-plate sm:h-32" role="img" aria-label={`${lines.length} lines from ${FROM} to ${TO} nm drawn as slit images`}>
          <path d={lines.map((nm) => `M${at(nm).toFixed(2)} 14V86`).join('')} stroke="var(--plate-line)" vectorEffect="non-scaling-stroke" strokeOpacity="0.82" />
        </svg>
        <div className="absolute inset-0 flex">
          {windows.map(({ from, to }) => (
            <Link key={from} href={`/lines?wavelength_min_nm=${from}&wavelength_max_nm=${to}${pin}`} aria-label={`Lines from ${from} to ${to} nm`} title={`Lines from ${from} to ${to} nm`}
              className="block hover:bg-lamp/25 focus-visible:bg-lamp/25" style={{ width: `${((to - from) / (TO - FROM)) * 100}%` }} />
          ))}
        </div>
      </div>
      <div className="relative h-12" aria-hidden="true">
        <svg viewBox="0 0 1000 10" preserveAspectRatio="none" className="absolute inset-x-0 top-0 h-2.5 w-full">
          <path d={TICKS} stroke="var(--rule-strong)" strokeWidth="1" vectorEffect="non-scaling-stroke" />
        </svg>
        {[400, 450, 500, 550, 600, 650, 700, 750].map((nm) => (
          <span key={nm} className={`num absolute top-3 -translate-x-1/2 text-xs text-muted ${nm % 100 === 50 ? 'max-sm:hidden' : ''}`} style={{ left: share(nm) }}>{nm}{nm === 400 ? '\u202fnm' : ''}</span>
        ))}
        {LANDMARKS.map(({ nm, text }) => (
          <span key={text} className="absolute top-7.5 -translate-x-1/2 whitespace-nowrap font-text text-sm italic text-lamp-ink max-sm:text-xs" style={{ left: share(nm) }}>{text}</span>
        ))}
      </div>
      <figcaption className="note mt-1">
        The {lines.length} electric dipole lines of this edition from {FROM} to {TO}&#8239;nm, all drawn alike: the table holds no intensities. Choose a stretch to list its lines.
      </figcaption>
    </figure>
  )
}
