import type { Metadata } from 'next'
import { AccountFrame } from '../_parts/account-frame'
import { PeopleView } from '../_people/people-view'

export const metadata: Metadata = { title: 'People' }

export default function PeoplePage() {
  return <AccountFrame here="/people"><PeopleView /></AccountFrame>
}
