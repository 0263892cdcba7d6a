export { parsed, refused, type Parsed } from '@/lib/units/parsed'

/** Physics that cannot be: well-formed input that breaks a rule of nature. `field` names the input that has to change. */
export class PhysicsError extends Error {
  readonly code: string
  readonly detail: string
  readonly field: string | undefined

  constructor(code: string, detail: string, field?: string) {
    super(detail)
    this.name = 'PhysicsError'
    this.code = code
    this.detail = detail
    this.field = field
  }
}
