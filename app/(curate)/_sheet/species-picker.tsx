'use client'
import { useQuery } from '@tanstack/react-query'
import { useId } from 'react'
import type { Species } from '@/openapi/schemas/species'
import { Chip } from '../../_components/chip'
import { apiQuery } from '../../_components/data/api'
import { speciesText } from '../../_components/names'

export const useSpeciesNames = (): Species[] => useQuery(apiQuery<Species[]>('/species', { limit: 1000 })).data?.data ?? []

/** The species whose published levels stand in the table, to be corrected in place. */
export function SpeciesPicker({ chosen, onChange }: { chosen: readonly string[]; onChange: (species: string[]) => void }) {
  const id = useId()
  const species = useSpeciesNames()
  return (
    <div className="flex flex-wrap items-center gap-2">
      <label htmlFor={id} className="note">Levels of</label>
      {chosen.map((one) => <Chip key={one} onRemove={() => onChange(chosen.filter((other) => other !== one))} removeLabel={`Put the levels of ${speciesText(one)} away`}>{speciesText(one)}</Chip>)}
      <select id={id} className="input min-h-7 w-auto py-0 text-sm" value="" onChange={(event) => { if (event.target.value !== '') onChange([...chosen, event.target.value]) }}>
        <option value="">{chosen.length === 0 ? 'choose a species' : 'one more species'}</option>
        {species.filter((one) => !chosen.includes(one.id)).map((one) => <option key={one.id} value={one.id}>{`${speciesText(one.id)}, ${one.name}, ${one.level_count}`}</option>)}
      </select>
    </div>
  )
}
