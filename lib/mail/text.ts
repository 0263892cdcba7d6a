/** Control characters, line ends of every kind, and characters that turn the direction of writing. */
const UNSEEN = /[\p{Cc}\p{Cs}\p{Zl}\p{Zp}\u061c\u200b-\u200f\u202a-\u202e\u2060-\u2069\ufeff]+/gu

/** Text from people on one line, so that it can make neither a field of the mail's head nor a line that seems to be ours. */
export function oneLine(text: string, most = 200): string {
  const line = text.replace(UNSEEN, ' ').replace(/ {2,}/g, ' ').trim()
  const letters = [...line]
  return letters.length <= most ? line : `${letters.slice(0, most - 1).join('')}…`
}

const MOST_QUOTED = 4000

/** What a person wrote, marked as a quotation line by line. */
export function quotation(text: string): string {
  const cut = text.length > MOST_QUOTED ? `${text.slice(0, MOST_QUOTED)} …` : text
  return cut.split(/\r\n|[\n\r\u2028\u2029]/).map((line) => `> ${line.replace(UNSEEN, ' ')}`.trimEnd()).join('\n')
}
