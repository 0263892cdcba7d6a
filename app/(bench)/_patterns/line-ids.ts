/** Lines that one picture takes. */
export const LINES_MOST = 20

const FORM = /^[A-Z][a-z]?-[IVXLC]+\.[1-9]\d{0,6}~[A-Z][a-z]?-[IVXLC]+\.[1-9]\d{0,6}$/

/** Whether a text has the form of a transition, `Na-I.1~Na-I.3`. (The contract's own check would bring its validator into the browser.) */
export const isTransitionId = (text: string): boolean => FORM.test(text)

/** The address of the page with these lines, and whatever else it is to show. */
export const patternsPage = (ids: readonly string[], more: Readonly<Record<string, string>> = {}): string =>
  `/patterns?lines=${ids.slice(0, LINES_MOST).join(',')}${Object.entries(more).map(([name, value]) => `&${name}=${encodeURIComponent(value)}`).join('')}`
