'use client'
import Link from 'next/link'
import { useEdition } from '@/app/_components/data/edition'
import { EmptyState } from '@/app/_components/empty-state'
import { patternsPage } from './line-ids'

const EXAMPLES: readonly { text: string; what: string; page: string }[] = [
  { text: 'Sodium D1 and D2', what: 'two anomalous patterns side by side, at 1 T', page: patternsPage(['Na-I.1~Na-I.2', 'Na-I.1~Na-I.3'], { field: '1T', theta: '0' }) },
  { text: 'Fe I 630.15 and 630.25 nm', what: 'the pair of solar magnetometry, at 2500 G', page: patternsPage(['Fe-I.23~Fe-I.29', 'Fe-I.24~Fe-I.30'], { field: '2500G', theta: '0' }) },
  { text: 'Li I 670.8 nm', what: 'fine structure that crosses over from two anomalous patterns to one triplet between 0 and 5 T', page: patternsPage(['Li-I.1~Li-I.2', 'Li-I.1~Li-I.3'], { field: '2T', theta: '90', resolving: '1000000' }) },
  { text: 'The three Mg b lines', what: 'a triplet of lines over 1.6 nm, at 1.5 T', page: patternsPage(['Mg-I.2~Mg-I.6', 'Mg-I.3~Mg-I.6', 'Mg-I.4~Mg-I.6'], { field: '1.5T' }) },
]

/** No line yet: what to do, and pictures one press away. */
export function Examples() {
  const { href } = useEdition()
  return (
    <EmptyState title="No line is in the picture yet">
      <p>Find lines above by nickname, wavelength or id, and add them; or begin with one of these:</p>
      <ul>
        {EXAMPLES.map(({ text, what, page }) => <li key={text}><Link href={href(page)}>{text}</Link>: {what}.</li>)}
      </ul>
    </EmptyState>
  )
}
