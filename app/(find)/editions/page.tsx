import type { Metadata } from 'next'
import { EditionsList } from '../_parts/editions-list'

export const metadata: Metadata = { title: 'Editions', description: 'Frozen, numbered publications of the whole table.' }

// The list itself is already in the page: the header needs it everywhere.
export default function EditionsPage() {
  return <EditionsList />
}
