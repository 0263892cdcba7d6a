/** What Next hands a page as its query. */
export type PageQuery = Record<string, string | string[] | undefined>

export const one = (query: PageQuery, name: string): string | undefined => {
  const value = query[name]
  return Array.isArray(value) ? value[0] : value
}

/** `edition` of a page address as the API wants it; what is not a number is left for the API to refuse. */
export const editionParam = (query: PageQuery): number | undefined => {
  const text = one(query, 'edition')
  return text !== undefined && /^[1-9]\d{0,8}$/.test(text) ? Number(text) : undefined
}

/** A segment of the address as text; one whose encoding is broken stands as it is, and names nothing. */
export function segment(text: string): string {
  try {
    return decodeURIComponent(text)
  } catch {
    return text
  }
}
