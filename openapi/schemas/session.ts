import { z } from 'zod'

export const RoleName = z.enum(['reader', 'curator', 'admin']).meta({ id: 'Role', description: 'reader reads and computes; curator also edits amendments; admin also publishes editions and manages people and keys.' })

export const Instant = z.iso.datetime({ offset: true }).meta({ id: 'Instant', description: 'ISO 8601 time with zone.', example: '2030-01-31T12:00:00.000Z', format: 'date-time' })

export const SignInRequest = z
  .strictObject({ email: z.string().min(1).max(320), password: z.string().min(1).max(1000) })
  .meta({ id: 'SignInRequest', example: { email: 'reader@bench.example', password: 'three unrelated words' } })

const User = z.strictObject({ id: z.uuid(), email: z.string(), name: z.string(), role: RoleName }).meta({ id: 'User' })

export const SignedIn = z.strictObject({ user: User, expires_at: Instant }).meta({ id: 'SignedIn' })
export type SignedIn = z.infer<typeof SignedIn>

export const Account = z
  .strictObject({
    id: z.uuid(), email: z.string(), name: z.string(),
    role: RoleName,
    role_in_force: RoleName.meta({ description: 'The role of this request: narrower than the account\'s where the key is.' }),
    demo: z.boolean().meta({ description: 'An invented account of the demo.' }),
    created_at: Instant,
    signed_in_by: z.enum(['session', 'key']),
    key: z.strictObject({ id: z.uuid(), name: z.string(), expires_at: Instant.nullable() }).nullable(),
  })
  .meta({ id: 'Account' })
export type Account = z.infer<typeof Account>

export const PasswordChange = z
  .strictObject({ password: z.string().min(1).max(1000).meta({ description: 'The present one.' }), new_password: z.string().min(1).max(1000).meta({ description: '8 to 128 characters, no rules of composition, not a common one.' }) })
  .meta({ id: 'PasswordChange', example: { password: 'three unrelated words', new_password: 'four quite unrelated words' } })
