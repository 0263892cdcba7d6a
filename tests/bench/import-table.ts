import { coupledRange, formatHalf } from '@/lib/atomic/half'
import { shellLetter, termLetter } from '@/lib/atomic/letters'

/** Species of the first edition with one electron, or one beside an s, outside of closed shells. */
const ONE = ['Li-I', 'Na-I', 'K-I', 'Rb-I', 'Cs-I'].map((species) => ({ species, inner: '', spins: [1] }))
const TWO = [['Mg-I', '3s.'], ['Ca-I', '4s.'], ['Sr-I', '5s.'], ['Ba-I', '6s.'], ['Zn-I', '4s.']].map(([species = '', inner = '']) => ({ species, inner, spins: [0, 2] }))
const ATOMS = [...ONE, ...TWO]
const [LOWEST_N, HIGHEST_N, HIGHEST_L] = [20, 60, 5]

export const IMPORT_HEADER = ['species', 'configuration', 'term', 'repeat_index', 'energy_invcm', 'energy_unc_invcm', 'energy_source', 'energy_evidence', 'line_checked', 'note'] as const

/**
 * Rows of an invented table that physics allows: nl and 4s.nl levels of species of the first edition, told apart by repeat index, with
 * intervals by Landé's rule. As many as asked, up to some hundred thousand; `shift` moves every energy.
 */
export function* inventedRows(count: number, shift = 0): Generator<string[]> {
  let given = 0
  for (let repeat = 1; repeat <= 1000; repeat += 1) {
    for (let n = LOWEST_N; n <= HIGHEST_N; n += 1) {
      for (let l = 0; l <= HIGHEST_L; l += 1) {
        for (const { species, inner, spins } of ATOMS) {
          for (const twoS of spins) {
            const place = 10_000 + (((repeat * (HIGHEST_N + 1) + n) * 7 + l) * 3 + twoS) * 0.3125
            for (const twoJ of coupledRange(twoS, 2 * l)) {
              if (given === count) return
              given += 1
              const energy = place + 0.0625 * (twoJ / 2) * (twoJ / 2 + 1) + shift
              yield [species, `${inner}${n}${shellLetter(l)}`, `${twoS + 1}${termLetter(l)}${l % 2 === 1 ? '*' : ''}${formatHalf(twoJ)}`, String(repeat), String(energy), '0.01', 'invented-levels', 'computed', 'false', given % 50 === 0 ? `=invented, "row" ${given}` : '']
            }
          }
        }
      }
    }
  }
}

const quote = (cell: string): string => (/[",\r\n]/.test(cell) ? `"${cell.replaceAll('"', '""')}"` : cell)

/** The table as a file. */
export function inventedTable(count: number, shift = 0): string {
  const lines = [IMPORT_HEADER.join(',')]
  for (const row of inventedRows(count, shift)) lines.push(row.map((cell) => quote(cell.startsWith('=') ? `'${cell}` : cell)).join(','))
  return `${lines.join('\r\n')}\r\n`
}
