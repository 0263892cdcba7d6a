import { nm } from '@/app/_components/line-columns'
import { speciesText } from '@/app/_components/names'
import type { ChosenLine } from './use-lines'

/** A line in plain text: `Na I 588.9951 nm (Na-I.1~Na-I.3)`. */
export const conventionalName = ({ id, detail }: ChosenLine): string => (detail === null ? id : `${speciesText(detail.lower.species)} ${nm(detail.wavelength_conventional_nm)} nm (${id})`)
