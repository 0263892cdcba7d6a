import { z } from 'zod'
import { defineOperation } from '@/openapi/core/define'
import { choiceParameter, textParameter } from '@/openapi/core/parameters'
import { Invitation, InvitationAcceptance, InvitationOffer, InvitationToken, NewInvitation, PasswordReset, PasswordResetRequest, PersonAccount, PersonChanges } from '@/openapi/schemas/people'
import { SignedIn } from '@/openapi/schemas/session'

const UUID = '00000000-0000-4000-8000-000000000000'
const TAG = 'People'
const byId = (what: string) => z.strictObject({ id: z.uuid().meta({ description: `Identifier of the ${what}.`, example: UUID }) })
const POOR_PASSWORD = ['password_too_short', 'password_too_long', 'password_common'] as const

export const listPeople = defineOperation({
  id: 'listPeople', method: 'get', path: '/people', tag: TAG, role: 'admin',
  summary: 'Everyone who has an account, by name',
  query: z.strictObject({
    q: textParameter('Only those whose name or address holds this.', { example: 'curator' }).optional(),
    role: choiceParameter(['reader', 'curator', 'admin'], 'Only those of this role.').optional(),
    active: choiceParameter(['true', 'false'], 'Only open accounts, or only closed ones.').optional(),
  }),
  answer: PersonAccount, list: true, edition: 'none',
})

export const getPerson = defineOperation({
  id: 'getPerson', method: 'get', path: '/people/{id}', tag: TAG, role: 'admin',
  summary: 'One account', params: byId('person'), answer: PersonAccount, edition: 'none',
  problems: ['person_unknown'], example: { params: { id: UUID } },
})

export const changePerson = defineOperation({
  id: 'changePerson', method: 'patch', path: '/people/{id}', tag: TAG, role: 'admin', sessionOnly: true,
  summary: 'Change the name or role of an account, close it or open it again',
  description: 'A new role is in force at once, in sessions and keys too. Closing ends all sessions and revokes all keys at once, and with them invitations and links to set a password that are still open; webhooks of the person are switched off. The last admin who can sign in stays one. Not for keys: a key must not make its holder more than they are.',
  params: byId('person'), body: PersonChanges, answer: PersonAccount, edition: 'none', ifMatch: true,
  problems: ['person_unknown', 'etag_stale', 'last_admin'], example: { params: { id: UUID }, body: { role: 'curator' } },
})

export const listInvitations = defineOperation({
  id: 'listInvitations', method: 'get', path: '/invitations', tag: TAG, role: 'admin',
  summary: 'Invitations, the newest first',
  query: z.strictObject({ state: choiceParameter(['open', 'accepted', 'revoked', 'expired'], 'Only those of this state.').optional() }),
  answer: Invitation, list: true, edition: 'none',
})

export const createInvitation = defineOperation({
  id: 'createInvitation', method: 'post', path: '/invitations', tag: TAG, role: 'admin', sessionOnly: true,
  summary: 'Invite a person; the link goes out by mail',
  description: 'The link is good for seven days and stands in the mail only. One open invitation to an address.',
  body: NewInvitation, answer: Invitation, edition: 'none', status: 201, idempotent: true,
  problems: ['account_exists', 'invitation_open'], example: { body: { email: 'new.colleague@bench.example', name: 'New Colleague', role: 'curator' } },
})

export const revokeInvitation = defineOperation({
  id: 'revokeInvitation', method: 'delete', path: '/invitations/{id}', tag: TAG, role: 'admin', sessionOnly: true,
  summary: 'Take an invitation back', params: byId('invitation'), answer: z.null(), edition: 'none', status: 204, ifMatch: true,
  problems: ['invitation_unknown', 'invitation_accepted', 'etag_stale'], example: { params: { id: UUID } },
})

export const readInvitation = defineOperation({
  id: 'readInvitation', method: 'post', path: '/invitations/read', tag: TAG, role: 'public',
  summary: 'What an invitation offers, for the holder of its link',
  body: InvitationToken, answer: InvitationOffer, edition: 'none',
  problems: ['invitation_unusable', 'cross_site'], example: { body: { token: 'not-a-token' } },
})

export const acceptInvitation = defineOperation({
  id: 'acceptInvitation', method: 'post', path: '/invitations/accept', tag: TAG, role: 'public',
  summary: 'Accept an invitation: makes the account and signs in',
  body: InvitationAcceptance, answer: SignedIn, edition: 'none', status: 201,
  problems: ['invitation_unusable', 'account_exists', ...POOR_PASSWORD, 'sign_in_unavailable', 'cross_site'],
  example: { body: { token: 'not-a-token', name: 'New Colleague', password: 'three unrelated words' } },
})

export const askPasswordReset = defineOperation({
  id: 'askPasswordReset', method: 'post', path: '/password-resets', tag: TAG, role: 'public',
  summary: 'Ask for a mail with a link to set a new password',
  description: 'The answer is the same, after the same time, whether or not there is an account. The link is good for an hour and once; a new one makes older ones void.',
  body: PasswordResetRequest, answer: z.null(), edition: 'none', status: 204,
  problems: ['reset_throttled', 'cross_site'], example: { body: { email: 'nobody@bench.example' } },
})

export const usePasswordReset = defineOperation({
  id: 'usePasswordReset', method: 'post', path: '/password-resets/use', tag: TAG, role: 'public',
  summary: 'Set a new password with the link of a mail; every session of the account ends',
  description: 'The owner of the account is told of it by mail.',
  body: PasswordReset, answer: z.null(), edition: 'none', status: 204,
  problems: ['reset_unusable', ...POOR_PASSWORD, 'sign_in_unavailable', 'cross_site'], example: { body: { token: 'not-a-token', new_password: 'four quite unrelated words' } },
})

export const ACCOUNT_OPERATIONS = [
  listPeople, getPerson, changePerson, listInvitations, createInvitation, revokeInvitation, readInvitation, acceptInvitation, askPasswordReset, usePasswordReset,
]
