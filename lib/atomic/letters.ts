/** Letters for total L: no J, and P and S are not used twice (Russell, Shenstone & Turner, Phys. Rev. 33, 900 (1929)). */
export const TERM_LETTERS = 'SPDFGHIKLMNOQRTUVWXYZ'

/** Letters for the orbital l of one electron: lower case of the same. */
export const SHELL_LETTERS = 'spdfghiklmnoqrtuvwxyz'

export const termLetter = (l: number): string => TERM_LETTERS[l] ?? `[L=${l}]`
export const shellLetter = (l: number): string => SHELL_LETTERS[l] ?? `[l=${l}]`

/** L of a capital letter; null where the letter is none of them (J, or anything else). */
export function lOfLetter(letter: string): number | null {
  const l = letter.length === 1 ? TERM_LETTERS.indexOf(letter) : -1
  return l < 0 ? null : l
}

export function lOfShellLetter(letter: string): number | null {
  const l = letter.length === 1 ? SHELL_LETTERS.indexOf(letter) : -1
  return l < 0 ? null : l
}
