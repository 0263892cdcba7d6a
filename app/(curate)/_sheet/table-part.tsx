'use client'
import { useQuery } from '@tanstack/react-query'
import { parseAsArrayOf, parseAsString, useQueryState } from 'nuqs'
import { useEffect, useMemo, useState } from 'react'
import type { Decimal } from '@/lib/curation/import/decimal'
import type { Source } from '@/openapi/schemas/source'
import { apiQuery } from '../../_components/data/api'
import { EmptyState } from '../../_components/empty-state'
import { speciesText } from '../../_components/names'
import { Notice } from '../../_components/notice'
import { count, plural } from '../../_components/number'
import { ProblemView } from '../../_components/problem-view'
import { TableSkeleton } from '../../_components/skeleton'
import { type ChangeState, subjectName } from './change-state'
import { ConflictView } from './conflict-view'
import { Grid } from './grid'
import { gridColumns, valueColumns } from './grid-columns'
import { planPaste, type PasteTarget, spread } from './paste'
import { PasteBox } from './paste-box'
import { PasteReport, type PasteProposal } from './paste-report'
import { RetireDialog } from './retire-dialog'
import { NO_FILTER, isFiltering, orderedLevels, type RowFilter } from './row-order'
import { RowPanel } from './row-panel'
import { SaveStatus } from './save-status'
import { at, blockOf } from './selection'
import { type SheetRow, shownValues } from './sheet'
import { SpeciesPicker } from './species-picker'
import { TableTools } from './table-tools'
import { useGrid, isLocked } from './use-grid'
import { useLevels } from './use-levels'
import { type SheetRoom, useSheetView } from './use-sheet'

const speciesParser = parseAsArrayOf(parseAsString).withDefault([])
let proposals = 0

/** The amendment as a table: levels to correct and new ones, edited in place. */
export function TablePart({ amendment, room, canEdit }: { amendment: string; room: SheetRoom; canEdit: boolean }) {
  const { sheet, saver } = room
  const view = useSheetView(sheet)
  const [species, setSpecies] = useQueryState('show', speciesParser)
  const levels = useLevels(sheet, species)
  const { data: sources } = useQuery(apiQuery<Source[]>('/sources', { limit: 1000 }))
  const [filter, setFilter] = useState<RowFilter>(NO_FILTER)
  const [spare, setSpare] = useState<ReadonlySet<string>>(new Set())
  const [showBefore, setShowBefore] = useState(false)
  const [said, setSaid] = useState('')
  const [pasting, setPasting] = useState(false)
  const [proposal, setProposal] = useState<PasteProposal | null>(null)
  const [retiring, setRetiring] = useState<string | null>(null)
  const [choosing, setChoosing] = useState<string | null>(null)
  const [restored, setRestored] = useState(0)
  const { restore } = room
  useEffect(() => {
    // what is brought back is written: only where one may edit, since that makes a draft of an amendment in review
    if (canEdit) void restore().then((rows) => setRestored((before) => before + rows), () => undefined)
  }, [canEdit, restore])

  const columns = useMemo(() => gridColumns(spare), [spare])
  // Order and filter are looked at when rows come and go or the filter changes, so that no row moves away under one's hands.
  const keys = useMemo(() => orderedLevels(view.order.flatMap((key) => sheet.row(key) ?? []), filter), [view.order, sheet, filter])
  const all = useMemo(() => [...view.rows.values()].filter((row) => row.subject.kind === 'level' && !row.gone).length, [view.rows])
  const sourceKeys = useMemo(() => [...new Set([...[...view.rows.values()].flatMap((row) => row.subject.source ?? []), ...(sources?.data ?? []).map((source) => source.key)])], [view.rows, sources])
  const grid = useGrid({ sheet, saver, keys, columns, canEdit, say: setSaid })
  const headRow = grid.headKey === undefined ? undefined : view.rows.get(grid.headKey)
  const conflict = choosing === null ? undefined : view.rows.get(choosing)
  const newSpecies = headRow?.subject.species ?? species[0] ?? null

  const addLevel = (of: string) => {
    setFilter(NO_FILTER)
    const key = sheet.addNew({ kind: 'level', species: of, level: null, source: null, massNumber: null })
    const line = orderedLevels(sheet.rows().filter((row) => !row.gone), NO_FILTER).indexOf(key)
    grid.select(at(line, 1))
    setSaid(`A row for a new level of ${speciesText(of)} is ready.`)
  }
  const propose = (cells: string[][], decimal: Decimal | null = null) => {
    const block = blockOf(grid.selection)
    // the identifier is the table's own: pasted ones are left out
    const named = /^(id|level)$/i.test(cells[0]?.[0] ?? '')
    const body = block.left === 0 || named ? cells.map((row) => row.slice(1)) : cells
    const targetOf = (row: SheetRow): PasteTarget => ({ key: row.key, subject: row.subject, name: subjectName(row.subject), values: shownValues(row), locked: isLocked(row) })
    const targets = keys.slice(block.top).flatMap((key) => { const row = sheet.row(key); return row === undefined ? [] : [targetOf(row)] })
    const fresh = newSpecies === null ? null : () => ({ key: null, subject: { kind: 'level' as const, species: newSpecies, level: null, source: null, massNumber: null }, name: `new level of ${speciesText(newSpecies)}`, values: {}, locked: false })
    const plan = planPaste(spread(body, { ...block, left: Math.max(1, block.left), right: Math.max(1, block.right) }), valueColumns(columns), Math.max(0, block.left - 1), targets, fresh, decimal)
    void Promise.all(plan.rows.map((row) => { const known = row.target.key === null ? undefined : sheet.row(row.target.key); return known === undefined ? undefined : saver.complete(known.key, known) })).then(() => {
      // written upon all published values, which the list of levels may not have told
      const states = plan.rows.map((row): ChangeState | null => {
        const known = row.target.key === null ? undefined : sheet.row(row.target.key)
        if (known === undefined) return { action: 'create', values: row.values, reason: null, successor: null, comment: null }
        return sheet.stateWith(known, row.cells.reduce((values, cell) => cell.column.write(values, cell.after), shownValues(known)))
      })
      const servers = plan.rows.map((row) => (row.target.key === null ? null : (sheet.row(row.target.key)?.server ?? null)))
      proposals += 1
      setProposal({ id: proposals, plan, states, servers, again: (mark) => propose(cells, mark) })
    })
    setPasting(false)
  }
  const writePasted = ({ plan, states }: PasteProposal) => {
    sheet.together(() => {
      const wanted = new Map(plan.rows.map((row, index) => [row.target.key ?? sheet.addNew(row.target.subject), states[index] ?? null]))
      grid.write('a pasted block', wanted)
    })
    setSaid(`${plural(plan.cells, 'cell')} written.`)
    setProposal(null)
    grid.focus()
  }

  if (room.loading) return <TableSkeleton rows={8} columns={7} label="Loading the changes" />
  if (room.error) return <ProblemView error={room.error} onRetry={() => void room.reload()} />
  return (
    <div className="space-y-3" onKeyDown={(event) => {
      if (!(event.ctrlKey || event.metaKey) || event.target instanceof HTMLInputElement || event.target instanceof HTMLTextAreaElement || event.defaultPrevented) return
      const key = event.key.toLowerCase()
      if (key === 'z' || key === 'y') { event.preventDefault(); grid.step(key === 'y' || event.shiftKey ? 'redo' : 'undo') }
    }}>
      <div className="flex flex-wrap items-center justify-between gap-x-8 gap-y-2">
        <SpeciesPicker chosen={species} onChange={(next) => void setSpecies(next.length === 0 ? null : next)} />
        <SaveStatus view={view} saver={saver} onConflict={() => setChoosing([...view.rows.values()].find((row) => row.save === 'conflict')?.key ?? null)} />
      </div>
      <TableTools canEdit={canEdit} view={view} grid={grid} filter={filter} onFilter={setFilter} newSpecies={newSpecies} onAdd={addLevel} onPaste={() => setPasting(true)}
        spare={spare} onSpare={setSpare} showBefore={showBefore} onShowBefore={setShowBefore} />
      {restored > 0 ? (
        <Notice title={`${plural(restored, 'row')} brought back`}>
          <p>An earlier page was closed before the server had what you typed there. It is saved now; where someone else wrote the same row meanwhile, both versions are shown to you. <button type="button" className="link" onClick={() => setRestored(0)}>Close</button></p>
        </Notice>
      ) : null}
      {levels.error ? <ProblemView error={levels.error} onRetry={levels.retry} heading="h3" /> : null}
      {keys.length === 0 ? (
        levels.loading ? <TableSkeleton rows={8} columns={7} label="Loading the levels" /> : isFiltering(filter) && all > 0 ? (
          <EmptyState title="No row fits the filter"><p>{plural(all, 'row')} {all === 1 ? 'is' : 'are'} hidden. <button type="button" className="link" onClick={() => setFilter(NO_FILTER)}>Show all of them</button></p></EmptyState>
        ) : (
          <EmptyState title={canEdit ? 'Nothing is changed yet' : 'This amendment changes no level'}>
            {canEdit ? <p>Choose a species above and type into the row of the level to correct; add a new level; paste a block from a spreadsheet; or import a file.</p> : <p>Sources and other values stand below.</p>}
          </EmptyState>
        )
      ) : (
        <div className="grid grid-cols-[minmax(0,1fr)] items-start gap-4 xl:grid-cols-[minmax(0,1fr)_25rem]">
          <div className="min-w-0">
            <Grid grid={grid} view={view} keys={keys} columns={columns} canEdit={canEdit} showBefore={showBefore} sources={sourceKeys} label="Levels of this amendment"
              onPaste={propose} onCopied={(cells) => setSaid(`${plural(cells, 'cell')} copied.`)} />
            <div className="note mt-1.5 flex flex-wrap justify-between gap-x-6">
              <span>{keys.length === all ? plural(all, 'row') : `${count(keys.length)} of ${plural(all, 'row')}`}{levels.loading ? ', more are loading' : ''}</span>
              <span className="hidden sm:inline">{canEdit ? 'Type to edit, Enter opens a cell, Escape leaves it, Shift with arrows selects a block, Ctrl+V pastes one' : 'Read only'}</span>
            </div>
          </div>
          <RowPanel amendment={amendment} room={room} row={headRow} canEdit={canEdit} onRetire={(row) => setRetiring(row.key)} onConflict={(row) => setChoosing(row.key)} />
        </div>
      )}
      <p role="status" className="sr-only">{said}</p>
      {pasting ? <PasteBox onPaste={propose} onClose={() => setPasting(false)} /> : null}
      {proposal ? <PasteReport key={proposal.id} amendment={amendment} proposal={proposal} onWrite={() => writePasted(proposal)} onClose={() => { setProposal(null); grid.focus() }} /> : null}
      {retiring !== null && view.rows.get(retiring) ? (
        <RetireDialog row={view.rows.get(retiring) as SheetRow} onClose={() => setRetiring(null)} onRetire={(state) => { grid.write('retiring a level', new Map([[retiring, state]])); setRetiring(null) }} />
      ) : null}
      {conflict?.theirs ? <ConflictView key={conflict.key} row={conflict} onClose={() => setChoosing(null)} onResolve={(wanted) => { sheet.resolve(conflict.key, wanted); setChoosing(null); void saver.now() }} /> : null}
    </div>
  )
}
