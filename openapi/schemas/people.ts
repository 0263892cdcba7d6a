import { z } from 'zod'
import { oneLine } from '@/openapi/core/one-line'
import { Person } from './change'
import { Instant, RoleName } from './session'

const etag = z.string().meta({ description: 'For If-Match.' })
const Email = z.email().max(320)
const name = oneLine()
const password = z.string().min(1).max(1000).meta({ description: '8 to 128 characters, no rules of composition, not a common one.' })
const token = z.string().min(1).max(200).meta({ description: 'Out of the link in the mail.' })
/** Invented, for examples. */
const TOKEN = '0123456789abcdefghijABCDEFGHIJ0123456789-_x'

export const PersonAccount = z
  .strictObject({
    id: z.uuid(), email: z.string(), name: z.string(), role: RoleName,
    active: z.boolean().meta({ description: 'False: the account is closed, its sessions have ended and its keys are revoked.' }),
    signs_in: z.boolean().meta({ description: 'Whether it has a password; the account of the command line has none.' }),
    demo: z.boolean(),
    keys_in_use: z.int(),
    last_seen_at: Instant.nullable().meta({ description: 'In a browser, to the minute.' }),
    created_at: Instant, updated_at: Instant, etag,
  })
  .meta({ id: 'PersonAccount' })
export type PersonAccount = z.infer<typeof PersonAccount>

export const PersonChanges = z
  .strictObject({
    name: name.optional(),
    role: RoleName.optional().meta({ description: 'In force at once, in sessions and keys too.' }),
    active: z.boolean().optional().meta({ description: 'false ends all sessions and revokes all keys at once, for good; true lets the person sign in again.' }),
  })
  .meta({ id: 'PersonChanges', example: { role: 'curator' } })
export type PersonChanges = z.infer<typeof PersonChanges>

export const Invitation = z
  .strictObject({
    id: z.uuid(), email: z.string(), name: z.string(), role: RoleName,
    state: z.enum(['open', 'accepted', 'revoked', 'expired']),
    invited_by: Person, created_at: Instant, expires_at: Instant,
    accepted_at: Instant.nullable(), accepted_by: Person.nullable(), revoked_at: Instant.nullable(), etag,
  })
  .meta({ id: 'Invitation' })
export type Invitation = z.infer<typeof Invitation>

export const NewInvitation = z
  .strictObject({ email: Email, name, role: RoleName })
  .meta({ id: 'NewInvitation', example: { email: 'new.colleague@bench.example', name: 'New Colleague', role: 'curator' } })
export type NewInvitation = z.infer<typeof NewInvitation>

export const InvitationToken = z.strictObject({ token }).meta({ id: 'InvitationToken', example: { token: TOKEN } })

export const InvitationOffer = z
  .strictObject({ email: z.string(), name: z.string(), role: RoleName, invited_by: z.string(), expires_at: Instant })
  .meta({ id: 'InvitationOffer', description: 'What the holder of the link is offered.' })
export type InvitationOffer = z.infer<typeof InvitationOffer>

export const InvitationAcceptance = z
  .strictObject({ token, name: name.optional().meta({ description: 'Default: the name in the invitation.' }), password })
  .meta({ id: 'InvitationAcceptance', example: { token: TOKEN, name: 'New Colleague', password: 'three unrelated words' } })
export type InvitationAcceptance = z.infer<typeof InvitationAcceptance>

export const PasswordResetRequest = z.strictObject({ email: z.string().trim().min(1).max(320) }).meta({ id: 'PasswordResetRequest', example: { email: 'nobody@bench.example' } })

export const PasswordReset = z.strictObject({ token, new_password: password }).meta({ id: 'PasswordReset', example: { token: TOKEN, new_password: 'four quite unrelated words' } })
