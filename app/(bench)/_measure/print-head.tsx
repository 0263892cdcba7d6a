'use client'
import { useSyncExternalStore } from 'react'
import { conventionalName } from './line-text'
import type { ApiMeta } from '@/app/_components/data/api'
import { day } from '@/app/_components/day'
import { UNIT_NAME } from './state'
import type { ChosenLine } from './use-lines'
import type { Address } from './use-measurement'

const never = () => () => undefined
/** Today, known in the browser only, so that what the server wrote is not another day. */
const useToday = (): string => useSyncExternalStore(never, () => day(new Date().toISOString()), () => '')

const SCALE = { exact: 'exact', uncertain: 'known to', free: 'fitted' } as const

/** The head of the printed page: what was measured, from which edition, when. */
export function PrintHead({ lines, meta, address }: { lines: readonly ChosenLine[]; meta: ApiMeta | undefined; address: Address }) {
  const today = useToday()
  const measured = address.quantity === 'ring_radii' ? `ring radii; free spectral range ${address.range} cm⁻¹, step of radius² ${address.step}` : `${address.quantity}, ${UNIT_NAME[address.unit]}`
  return (
    <div className="mb-4 hidden print:block">
      <p className="font-text text-2xl">{address.unknown === 'g' ? 'g from measured positions' : 'Field from measured positions'}</p>
      <p className="note">
        Lodeterm, edition {meta?.edition ?? 'not known'}, {meta?.constants ?? ''}, physics {String(meta?.physics ?? '')}; printed {today}
        {address.invented ? '. Example with invented data: nobody measured these positions.' : ''}
      </p>
      <p className="note">
        Measured: {measured}; scale {SCALE[address.scale]}{address.scale === 'uncertain' ? ` ± ${address.scale_unc}` : ''}
        {address.unknown === 'g' ? `; field ${address.field}${address.field_unc === '' ? '' : ` ± ${address.field_unc}`}` : ''}. Lines: {lines.map((line, i) => `${lines.length > 1 ? `${i + 1}: ` : ''}${conventionalName(line)}`).join('; ')}
      </p>
    </div>
  )
}
