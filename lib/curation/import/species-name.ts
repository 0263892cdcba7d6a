const NAME = /^[A-Z][a-z]?-[IVXLCDM]+$/
/** As papers and other tables print it, with a space for our hyphen: nothing else can be meant. */
const PRINTED = /^([A-Z][a-z]?)\s+([IVXLCDM]+)$/
const LOOSE = /^([A-Z]{1,2})[\s_-]*([IVXLCDM]+)$/i

/** A species by our name where the cell names one, `Na I` as well as `Na-I`; other text is left as it is. */
export function speciesName(text: string | null): string | null {
  const trimmed = text?.trim() ?? ''
  return trimmed === '' ? null : trimmed.replace(PRINTED, '$1-$2')
}

/** Our names that a text comes near to: `na-i`, `NaI` and `Na_I` mean `Na-I`, and `SII` may be two. */
export function speciesLike(text: string): string[] {
  const found = new Set<string>()
  for (const length of [1, 2]) {
    const [, element = '', stage = ''] = LOOSE.exec(`${text.slice(0, length)}-${text.slice(length).replace(/^[\s_-]+/, '')}`) ?? []
    if (element.length === length && stage !== '') found.add(`${element.charAt(0).toUpperCase()}${element.slice(1).toLowerCase()}-${stage.toUpperCase()}`)
  }
  return [...found]
}

/** What a text may name, to be looked up in the table. */
export const speciesMeant = (text: string | null): string[] => {
  const name = speciesName(text)
  return name === null ? [] : NAME.test(name) ? [name] : speciesLike(name)
}
