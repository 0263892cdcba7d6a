import type { Finding } from '@/openapi/schemas/change'

/** Gathers what is to be said about one change, each thing once. */
export class Findings {
  readonly list: Finding[] = []

  error(code: string, field: string | null, detail: string): void {
    this.add('error', code, field, detail)
  }

  warning(code: string, field: string | null, detail: string): void {
    this.add('warning', code, field, detail)
  }

  private add(severity: Finding['severity'], code: string, field: string | null, detail: string): void {
    if (!this.list.some((one) => one.code === code && one.field === field && one.detail === detail)) this.list.push({ severity, code, field, detail })
  }

  get errors(): number {
    return this.list.reduce((count, one) => count + (one.severity === 'error' ? 1 : 0), 0)
  }
}
