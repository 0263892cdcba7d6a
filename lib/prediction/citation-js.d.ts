declare module '@citation-js/core' {
  export class Cite {
    constructor(items: readonly Record<string, unknown>[])
    format(format: string, options?: Record<string, unknown>): string
  }
  export const plugins: { config: { get(plugin: string): { format: Record<string, unknown> } } }
}
declare module '@citation-js/plugin-bibtex'
