import { z } from 'zod'
import { defineOperation } from '@/openapi/core/define'
import { ApiKey, NewKey, NewKeyRequest } from '@/openapi/schemas/key'
import { Account, PasswordChange, SignedIn, SignInRequest } from '@/openapi/schemas/session'

const UUID = '00000000-0000-4000-8000-000000000000'
const byId = z.strictObject({ id: z.uuid().meta({ description: 'Identifier of the key.', example: UUID }) })

export const signIn = defineOperation({
  id: 'signIn',
  method: 'post',
  path: '/session',
  summary: 'Sign in in a browser',
  description: 'Sets the session cookie. Scripts use an API key instead. Failures make the next attempt wait, never more than a quarter of an hour.',
  tag: 'Account',
  role: 'public',
  body: SignInRequest,
  answer: SignedIn,
  edition: 'none',
  status: 201,
  problems: ['sign_in_refused', 'sign_in_throttled', 'sign_in_unavailable', 'cross_site'],
  example: { body: { email: 'nobody@bench.example', password: 'three unrelated words' } },
})

export const signOut = defineOperation({
  id: 'signOut',
  method: 'delete',
  path: '/session',
  summary: 'Sign out: the session ends at once',
  tag: 'Account',
  role: 'account',
  sessionOnly: true,
  answer: z.null(),
  edition: 'none',
  status: 204,
})

export const getMe = defineOperation({
  id: 'getMe',
  method: 'get',
  path: '/me',
  summary: 'Your account and the role in force',
  tag: 'Account',
  role: 'account',
  answer: Account,
  edition: 'none',
})

export const changePassword = defineOperation({
  id: 'changePassword',
  method: 'post',
  path: '/password-changes',
  summary: 'Set a new password; your other sessions end',
  description: 'You are told of it by mail, so that you hear of it where it was not you.',
  tag: 'Account',
  role: 'account',
  sessionOnly: true,
  body: PasswordChange,
  answer: z.null(),
  edition: 'none',
  status: 204,
  problems: ['password_wrong', 'password_too_short', 'password_too_long', 'password_common', 'password_unchanged', 'sign_in_throttled'],
  example: { body: { password: 'three unrelated words', new_password: 'four quite unrelated words' } },
})

export const listKeys = defineOperation({
  id: 'listKeys',
  method: 'get',
  path: '/keys',
  summary: 'Your API keys, the newest first; an admin sees all',
  tag: 'Account',
  role: 'account',
  answer: ApiKey,
  list: true,
  edition: 'none',
})

export const createKey = defineOperation({
  id: 'createKey',
  method: 'post',
  path: '/keys',
  summary: 'Make an API key; it is shown once',
  description: 'Only the SHA-256 of the key is kept. A key made with a key has at most its role and ends no later.',
  tag: 'Account',
  role: 'account',
  body: NewKeyRequest,
  answer: NewKey,
  edition: 'none',
  status: 201,
  idempotent: true,
  problems: ['role_above_owner', 'expiry_past', 'expiry_beyond_own', 'too_many_keys'],
  example: { body: { name: 'fit notebook', role: 'reader', expires_at: null } },
})

export const getKey = defineOperation({
  id: 'getKey',
  method: 'get',
  path: '/keys/{id}',
  summary: 'One API key, without its secret',
  tag: 'Account',
  role: 'account',
  params: byId,
  answer: ApiKey,
  edition: 'none',
  problems: ['key_not_found'],
  example: { params: { id: UUID } },
})

export const revokeKey = defineOperation({
  id: 'revokeKey',
  method: 'delete',
  path: '/keys/{id}',
  summary: 'Revoke an API key, at once and for good',
  tag: 'Account',
  role: 'account',
  params: byId,
  answer: z.null(),
  edition: 'none',
  status: 204,
  ifMatch: true,
  problems: ['key_not_found', 'etag_stale'],
  example: { params: { id: UUID } },
})
