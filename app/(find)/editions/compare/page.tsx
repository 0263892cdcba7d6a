import type { Metadata } from 'next'
import { CompareView } from '../../_parts/compare-view'

export const metadata: Metadata = { title: 'Compare editions', description: 'What one edition shows otherwise than another.' }

export default function ComparePage() {
  return <CompareView />
}
