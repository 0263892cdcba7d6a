import type pg from 'pg'
import { elementByZ, toRoman } from '@/lib/atomic/elements'
import { shellLetter, termLetter } from '@/lib/atomic/letters'
import type { LevelRow } from '@/lib/curation/rows'

/** One change as the database keeps it. */
interface StoredChange { kind: string; action: string; subject: string; species: string | null; given: unknown; row: unknown; base: number | null }

export const INVENTED_SOURCE = 'invented-levels'

/** Ions with one electron outside a neon core, from Al III on: none of them is among the first edition's species. */
export function inventedSpecies(count: number): { id: string; z: number; name: string; element: string }[] {
  return Array.from({ length: count }, (_, at) => {
    const z = 13 + at
    const element = elementByZ(z)
    if (element === null) throw new RangeError(`there is no element ${z}`)
    return { id: `${element.symbol}-${toRoman(z - 10)}`, z, name: element.name, element: element.symbol }
  })
}

/** Levels of one electron, nl with J = l +- 1/2, upwards from 3s: invented energies that rise from one to the next. */
function inventedLevels(count: number, shift: number): { row: LevelRow; given: Record<string, unknown> }[] {
  const levels: { row: LevelRow; given: Record<string, unknown> }[] = []
  for (let n = 3; levels.length < count; n += 1) {
    for (let l = 0; l < Math.min(n, 8) && levels.length < count; l += 1) {
      for (const twoJ of l === 0 ? [1] : [2 * l - 1, 2 * l + 1]) {
        if (levels.length === count) break
        const at = levels.length
        const parity = l % 2 === 1 ? ('odd' as const) : ('even' as const)
        const energyInvcm = at === 0 ? 0 : 50_000 + 37.125 * at + shift
        const configuration = `${n}${shellLetter(l)}`
        const row: LevelRow = {
          configuration, coupling: 'LS', label: null, twoS: 1, l, twoJ, twoK: null, coreTwoS: null, coreL: null, coreTwoJ: null, lOuter: null, outerTwoJ: null, parity,
          repeatIndex: null, alternativeName: null, energyInvcm, energyUncInvcm: 0.01, energyLiteral: null, energySource: INVENTED_SOURCE, energyEvidence: 'computed',
          lineChecked: false, note: null, status: 'active', retiredReason: null, successor: null, gChosen: null, gChosenReason: null, measured: [],
        }
        const term = `2${termLetter(l)}${parity === 'odd' ? '*' : ''}${twoJ}/2`
        levels.push({ row, given: { configuration, coupling: 'LS', term, energy_invcm: energyInvcm, energy_unc_invcm: 0.01, energy_source: INVENTED_SOURCE, energy_evidence: 'computed' } })
      }
    }
  }
  return levels
}

/** Creation of the species, their source and all their levels, or a new energy (`replace`) for each of them. */
export function* inventedChanges(size: { species: number; levels: number }, action: 'create' | 'replace', shift = 0): Generator<StoredChange> {
  const create = action === 'create'
  if (create) {
    const source = { citation: 'Invented for measuring', kind: 'other', authors: null, title: null, journal: null, year: null, doi: null, note: null }
    yield { kind: 'source', action, subject: INVENTED_SOURCE, species: null, given: source, row: source, base: null }
  }
  for (const { id, z, name, element } of inventedSpecies(size.species)) {
    if (create) {
      const row = { name, element, z, charge: z - 11, coreConfiguration: '[Ne]', ionisationEnergyInvcm: null, ionisationSource: null, ionisationEvidence: null, note: null }
      yield { kind: 'species', action, subject: id, species: id, given: { name, core_configuration: '[Ne]' }, row, base: null }
    }
    for (const [at, { row, given }] of inventedLevels(size.levels, shift).entries()) {
      // the ground level stays at zero, and a change that changes nothing is none
      if (!create && at === 0) continue
      yield { kind: 'level', action, subject: `${id}.${at + 1}`, species: id, given, row, base: create ? null : 1 }
    }
  }
}

/** Stores an accepted amendment with these changes, past the application; returns its id. Needs two users: who wrote it and who accepted it. */
export async function storeAccepted(client: pg.Client, title: string, changes: Iterable<StoredChange>): Promise<string> {
  const { rows: people } = await client.query<{ id: string }>("select id from users where role = 'curator' order by email limit 2")
  const [author, reviewer] = people.map(({ id }) => id)
  const { rows } = await client.query<{ id: string }>('insert into amendments (title, author, state) values ($1, $2, $3) returning id', [title, author, 'draft'])
  const id = rows[0]?.id ?? ''
  const store = (part: StoredChange[]) =>
    client.query(
      `insert into amendment_changes (amendment_id, kind, action, subject, species_id, given, "row", base_revision, author)
       select $1, kind, action, subject, species, given, "row", base, $2 from jsonb_to_recordset($3) as c (kind text, action text, subject text, species text, given jsonb, "row" jsonb, base integer)`,
      [id, author, JSON.stringify(part)],
    )
  let part: StoredChange[] = []
  for (const change of changes) {
    part.push(change)
    if (part.length < 5000) continue
    await store(part)
    part = []
  }
  if (part.length > 0) await store(part)
  await client.query('insert into amendment_authors (amendment_id, user_id) values ($1, $2)', [id, author])
  await client.query("insert into reviews (amendment_id, version, asked_by, outcome, closed_by, closed_at) values ($1, 1, $2, 'accepted', $3, now())", [id, author, reviewer])
  await client.query("update amendments set state = 'accepted' where id = $1", [id])
  return id
}
