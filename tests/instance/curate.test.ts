import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { accessibilityFindings, drawn, go, openBrowser, overflow, type Theme, visit } from '../browser/browser'
import { type Instance, startInstance } from '../support/instance'
import { begun, cell, type Curator, curators, focused, isSaved, openTable, panel, paste, stored, storedOf, typeInto } from './curators'

/** The curate pages as two curators use them. All digits are invented. */
let instance: Instance
let browser: Browser
let as: ReturnType<typeof curators>
beforeAll(async () => {
  instance = await startInstance('curate')
  browser = await openBrowser()
  as = curators(instance, browser)
})
afterAll(async () => {
  await browser?.close()
  await instance?.end()
})

describe('who finds the room', () => {
  it('strangers are asked to sign in and come back, readers are told whom it is for, curators find it in the head', async () => {
    const stranger = await visit(browser, { at: instance.base })
    await go(stranger.page, '/curate')
    expect(new URL(stranger.page.url()).pathname + new URL(stranger.page.url()).search).toBe('/sign-in?next=%2Fcurate')
    expect(await stranger.page.getByRole('navigation', { name: 'Main' }).getByRole('link', { name: 'Curate' }).count()).toBe(0)
    const reader = await as('reader')
    await go(reader.page, '/curate')
    expect(await reader.page.getByRole('main').innerText()).toMatch(/for curators/)
    const curator = await as('curator')
    await go(curator.page, '/')
    await curator.page.getByRole('navigation', { name: 'Main' }).getByRole('link', { name: 'Curate' }).click()
    await curator.page.getByRole('heading', { name: 'Curate', level: 1 }).waitFor()
    for (const one of [stranger, reader, curator]) await one.context.close()
  })
})

describe('a sodium level is corrected', () => {
  let author: Curator
  let id = ''
  beforeAll(async () => { author = await as('curator') })
  afterAll(() => author?.context.close())

  it('begins on the dashboard', async () => {
    const { page } = author
    await go(page, '/curate')
    await page.getByLabel('Title').fill('Na I 3p from an invented comb')
    await page.getByRole('button', { name: 'Begin' }).click()
    await page.waitForURL(/\/curate\/[0-9a-f-]{36}/)
    id = /[0-9a-f-]{36}/.exec(page.url())?.[0] ?? ''
    await expect.poll(() => page.getByRole('main').innerText()).toMatch(/Nothing is changed yet/)
  })

  it('by typing into its row: findings, before and after, and the lines that move', async () => {
    const { page } = author
    await page.getByLabel('Levels of').selectOption('Na-I')
    await page.getByRole('grid').waitFor()
    await typeInto(page, 'Na-I.3', 'Energy', '16973.3800')
    expect(await focused(page)).toMatchObject({ row: '5', column: '5', role: 'gridcell' })
    await page.keyboard.press('ArrowUp')
    await isSaved(page)
    await expect.poll(() => panel(page), { timeout: 15_000 }).toMatch(/Na-I\.1~Na-I\.3/)
    const told = await panel(page)
    expect(told).toMatch(/The energy moves by/)
    expect(told).toMatch(/16973\.36619/)
    expect(told).toMatch(/588\.99509 → 588\.9946/)
    expect(told).toMatch(/pm/)
    const change = await storedOf(author, id, 'Na-I.3')
    expect(change).toMatchObject({ action: 'replace', values: { configuration: '3p', energy_literal: '16973.3800', energy_source: 'sansonetti-2008-na' } })
    expect(change?.findings.map((finding) => finding.severity)).toContain('warning')
  })

  it('undo takes it out on the server too, redo brings it back', async () => {
    const { page } = author
    await page.keyboard.press('Control+z')
    await expect.poll(async () => (await stored(author, id)).length).toBe(0)
    expect(await (await cell(page, 'Na-I.3', 'Energy')).innerText()).toBe('16973.36619')
    await page.keyboard.press('Control+Shift+z')
    await expect.poll(async () => (await storedOf(author, id, 'Na-I.3'))?.values.energy_literal).toBe('16973.3800')
    await isSaved(page)
  })

  it('is kept on the server as it is typed, and Escape takes the typing back', async () => {
    const { page } = author
    await (await cell(page, 'Na-I.2', 'Note')).click()
    await page.keyboard.type('half a sen')
    await expect.poll(async () => (await storedOf(author, id, 'Na-I.2'))?.values.note, { timeout: 5_000 }).toBe('half a sen')
    await page.keyboard.press('Escape')
    await expect.poll(async () => storedOf(author, id, 'Na-I.2')).toBeUndefined()
  })

  it('a tab closed in the middle of a word loses nothing', async () => {
    const page = await author.context.newPage()
    await openTable(page, id)
    await (await cell(page, 'Na-I.4', 'Note')).click()
    await page.keyboard.type('closed at on')
    await expect.poll(async () => (await storedOf(author, id, 'Na-I.4'))?.values.note).toBe('closed at on')
    await page.keyboard.type('ce')
    await page.close({ runBeforeUnload: true })
    await expect.poll(async () => (await storedOf(author, id, 'Na-I.4'))?.values.note, { timeout: 10_000 }).toBe('closed at once')
  })

  it('an error is told in the margin, on the cell and beside, and blocks the submission', async () => {
    const { page } = author
    await openTable(page, id)
    await typeInto(page, 'Na-I.5', 'Term', '2D9/2')
    await isSaved(page)
    const term = await cell(page, 'Na-I.5', 'Term')
    await expect.poll(() => term.getAttribute('aria-invalid')).toBe('true')
    expect(await term.innerText()).toMatch(/error: /)
    expect(await page.getByRole('rowheader', { name: /Na-I\.5/ }).innerText()).toMatch(/1 error/)
    await expect.poll(() => page.getByRole('button', { name: 'Ask for review' }).isDisabled()).toBe(true)
    expect(await page.getByRole('main').innerText()).toMatch(/Ask for review is not possible: .*error/)
    await page.keyboard.press('Control+z')
    await expect.poll(() => page.getByRole('button', { name: 'Ask for review' }).isEnabled()).toBe(true)
  })

  it('keys alone lead through the table and out of it', async () => {
    const { page } = author
    await (await cell(page, 'Na-I.1', 'Configuration')).click()
    const after = async (...keys: string[]) => {
      for (const key of keys) await page.keyboard.press(key)
      const { row, column } = await focused(page)
      return [row, column]
    }
    expect(await after('Control+Home')).toEqual(['2', '1'])
    expect(await after('ArrowRight', 'ArrowDown')).toEqual(['3', '2'])
    expect(await after('Tab', 'Shift+Tab', 'End')).toEqual(['3', '13'])
    expect(await after('Tab')).toEqual(['4', '1'])
    expect(await after('Control+ArrowDown')).toEqual(['12', '1'])
    expect(await after('PageUp', 'Home')).toEqual(['2', '1'])
    await after('ArrowRight', 'Shift+ArrowDown', 'Shift+ArrowRight')
    expect(await page.locator('[role=gridcell][aria-selected=true]').count()).toBe(4)
    await page.keyboard.press('Escape')
    await page.keyboard.press('Control+End')
    await page.keyboard.press('Tab')
    expect((await focused(page)).role).not.toBe('gridcell')
    await (await cell(page, 'Na-I.1', 'Note')).click()
    await page.keyboard.press('F2')
    await page.keyboard.type('not kept')
    await page.keyboard.press('Escape')
    expect(await focused(page)).toMatchObject({ row: '2', column: '13' })
    expect(author.complaints).toEqual([])
  })

  it('is sent to review; its author cannot accept it, a colleague can', async () => {
    const { page } = author
    await page.getByRole('button', { name: 'Ask for review' }).click()
    await page.getByRole('dialog').getByRole('button', { name: 'Ask for review' }).click()
    expect(await page.getByRole('dialog').innerText()).toMatch(/The warnings want a comment/)
    await page.getByLabel('What the reviewer should know').fill('The shift is meant.')
    await page.getByRole('dialog').getByRole('button', { name: 'Ask for review' }).click()
    await expect.poll(() => page.getByRole('main').innerText()).toMatch(/In review/)
    await expect.poll(() => page.getByRole('button', { name: 'Accept' }).isDisabled()).toBe(true)
    expect(await page.getByRole('main').innerText()).toMatch(/Accept is not possible: /)

    const reviewer = await as('second.curator')
    await go(reviewer.page, '/curate')
    await reviewer.page.getByRole('region', { name: 'To review' }).getByRole('link', { name: 'Na I 3p from an invented comb' }).click()
    await reviewer.page.getByRole('link', { name: 'Review' }).click()
    await expect.poll(() => reviewer.page.getByRole('main').innerText(), { timeout: 15_000 }).toMatch(/588\.99509 → 588\.9946/)
    await reviewer.page.getByRole('button', { name: 'Comment on Na-I.3' }).click()
    await reviewer.page.getByRole('textbox', { name: 'Comment on Na-I.3' }).fill('Which comb?')
    await reviewer.page.getByRole('form', { name: 'Comment on Na-I.3' }).getByRole('button', { name: 'Comment' }).click()
    await expect.poll(() => reviewer.page.getByRole('list', { name: 'Comments on Na-I.3' }).innerText()).toMatch(/Which comb\?/)
    await reviewer.page.getByRole('button', { name: 'Resolve' }).click()
    await expect.poll(() => reviewer.page.getByRole('list', { name: 'Comments on Na-I.3' }).innerText()).toMatch(/Resolved by/)
    await reviewer.page.getByRole('button', { name: 'Accept' }).first().click()
    await reviewer.page.getByRole('dialog').getByRole('button', { name: 'Accept' }).click()
    await expect.poll(() => reviewer.page.getByRole('main').innerText()).toMatch(/accepted it on/)
    expect(reviewer.complaints).toEqual([])
    await reviewer.context.close()
  })
})

describe('a block from a spreadsheet', () => {
  it('is reported cell by cell before anything is written, then written, as one step to undo', async () => {
    const author = await as('curator')
    const { page } = author
    const id = await begun(author, 'Pasted')
    await openTable(page, id)
    await (await cell(page, 'Na-I.10', 'Energy')).click()
    await paste(page, '34548.7291\t0.002\n34548.764\t-1\r\n')
    const report = page.getByRole('dialog')
    await expect.poll(() => report.innerText()).toMatch(/3 cells in 2 rows would change\. 1 cell is the same already/)
    await expect.poll(() => report.innerText()).toMatch(/never negative/)
    expect(await stored(author, id)).toEqual([])
    await report.getByRole('button', { name: 'Write these 3 cells' }).click()
    await expect.poll(async () => (await stored(author, id)).map((change) => [change.subject, change.values.energy_unc_invcm])).toEqual([['Na-I.10', '0.002'], ['Na-I.11', '-1']])
    await isSaved(page)
    await page.keyboard.press('Control+z')
    await expect.poll(() => stored(author, id)).toEqual([])
    // below the last row it makes new levels, of the species in focus
    await page.keyboard.press('Control+End')
    await page.keyboard.press('Home')
    await paste(page, 'Configuration\tCoupling\tTerm\tEnergy\tSource\tEvidence\n3d\tLS\t2D3/2\t29172.887\tsansonetti-2008-na\tread\n6s\tLS\t2S1/2\t36372.618\tsansonetti-2008-na\tread\n')
    await expect.poll(() => report.innerText()).toMatch(/The first row was read as headings/)
    await expect.poll(() => report.innerText()).toMatch(/new level of Na/)
    await report.getByRole('button', { name: /Write these/ }).click()
    await expect.poll(async () => (await stored(author, id)).filter((change) => change.action === 'create').map((change) => change.values.energy_literal)).toEqual(['36372.618'])
    await author.context.close()
  })
})

describe('what is not corrected but made or ended', () => {
  it('a source, a new level that names it, a level retired with its reason, each taken out again', async () => {
    const author = await as('curator')
    const { page } = author
    const id = await begun(author, 'New and retired')
    await openTable(page, id)
    await page.getByRole('button', { name: 'Add or correct' }).click()
    await page.getByRole('menuitem', { name: 'Sources' }).click()
    await page.getByLabel('Key').fill('Not a key')
    await page.keyboard.press('Enter')
    expect(await page.getByRole('dialog').innerText()).toMatch(/small letters, digits and hyphens/)
    await page.getByLabel('Key').fill('invented-2030')
    await page.keyboard.press('Enter')
    await page.getByLabel('Reference in full').fill('An invented reference, 2030.')
    await page.getByLabel('Kind').selectOption('report')
    await page.getByRole('button', { name: 'Done' }).click()
    await expect.poll(async () => (await storedOf(author, id, 'invented-2030'))?.values).toEqual({ citation: 'An invented reference, 2030.', kind: 'report' })

    await page.getByRole('button', { name: /^New level of Na/ }).click()
    for (const text of ['6s', 'LS', '2S1/2', '36372.618', '', 'invented-2030', 'read']) {
      if (text !== '') await page.keyboard.type(text)
      await page.keyboard.press('Tab')
    }
    await isSaved(page)
    const made = (await stored(author, id)).find((change) => change.action === 'create' && change.values.term === '2S1/2')
    expect(made).toMatchObject({ values: { configuration: '6s', energy_literal: '36372.618', energy_source: 'invented-2030', energy_evidence: 'read' }, findings: [] })

    await (await cell(page, 'Na-I.11', 'Energy')).click()
    await page.getByRole('button', { name: 'Retire this level' }).click()
    await page.getByRole('dialog').getByRole('button', { name: 'Retire' }).click()
    expect(await page.getByRole('dialog').innerText()).toMatch(/Say why/)
    await page.getByLabel('Reason').fill('Never seen again.')
    await page.getByRole('dialog').getByRole('button', { name: 'Retire' }).click()
    await expect.poll(async () => (await storedOf(author, id, 'Na-I.11'))?.action).toBe('retire')
    await expect.poll(() => panel(page), { timeout: 15_000 }).toMatch(/no longer there/)
    await page.getByRole('button', { name: 'Take this change out' }).click()
    await expect.poll(async () => storedOf(author, id, 'Na-I.11')).toBeUndefined()
    await (await cell(page, made?.subject ?? '', 'Energy')).click()
    await page.getByRole('button', { name: 'Take this level out' }).click()
    await expect.poll(async () => (await stored(author, id)).map((change) => change.subject)).toEqual(['invented-2030'])
    expect(author.complaints).toEqual([])
    await author.context.close()
  })

  it('title and note are edited in place; a withdrawn amendment can only be read', async () => {
    const author = await as('curator')
    const { page } = author
    const id = await begun(author, 'A slip')
    await go(page, `/curate/${id}`)
    await page.getByRole('button', { name: 'Edit title and note' }).click()
    await page.getByRole('textbox', { name: 'Title' }).fill('No slip')
    await page.getByRole('textbox', { name: 'Note' }).fill('As it should be called.')
    await page.getByRole('button', { name: 'Save' }).click()
    await page.getByRole('heading', { name: 'No slip' }).waitFor()
    await page.getByRole('button', { name: 'Withdraw' }).click()
    await page.getByRole('dialog').getByRole('button', { name: 'Withdraw' }).click()
    await expect.poll(() => page.getByRole('main').innerText()).toMatch(/Withdrawn[\s\S]*Read only/)
    expect(await page.getByRole('button', { name: 'Edit title and note' }).count()).toBe(0)
    await author.context.close()
  })
})

describe('two curators at one row', () => {
  it('both versions stand side by side, value by value, and nothing typed is lost', async () => {
    const [one, two] = [await as('curator'), await as('second.curator')]
    const id = await begun(one, 'Two at one table')
    for (const { page } of [one, two]) await openTable(page, id)
    await typeInto(one.page, 'Na-I.3', 'Energy', '16973.3700')
    await isSaved(one.page)
    await typeInto(two.page, 'Na-I.3', 'Energy', '16973.3680')
    await two.page.getByRole('button', { name: 'Look at both versions' }).first().click()
    await expect.poll(() => two.page.getByRole('dialog').innerText()).toMatch(/wrote this row while you were editing it/)
    await two.page.getByRole('button', { name: 'Keep all of mine' }).click()
    await isSaved(two.page)
    await typeInto(two.page, 'Na-I.3', 'Note', 'from the second')
    await isSaved(two.page)
    // the first one's tag is stale now
    await typeInto(one.page, 'Na-I.3', 'Energy', '16973.3690')
    await one.page.getByRole('button', { name: 'Look at both versions' }).first().click()
    const screen = one.page.getByRole('dialog')
    expect(await screen.getByRole('radio', { name: 'Energy as printed: mine' }).isChecked()).toBe(true)
    expect(await screen.getByRole('radio', { name: 'Note: theirs' }).isChecked()).toBe(true)
    expect(await accessibilityFindings(one.page)).toEqual([])
    await screen.getByRole('button', { name: 'Write the choice' }).click()
    await isSaved(one.page)
    expect((await storedOf(one, id, 'Na-I.3'))?.values).toMatchObject({ energy_literal: '16973.3690', note: 'from the second' })
    for (const { context } of [one, two]) await context.close()
  })
})

describe('a file', () => {
  const paper = 'Ion;Conf;Term;Level (cm-1);Colour\nNa-I;3p;2P*3/2;16973,3680;yellow\nNa-I;6s;2S1/2;36372,618;\n'
  const choose = (page: Page, name: string, text: string) => page.setInputFiles('input[type=file]', { name, mimeType: 'text/csv', buffer: Buffer.from(text) })
  it('is read, its headers asked about, reported row by row, imported, and the second time changes nothing', async () => {
    const author = await as('curator')
    const { page } = author
    const id = await begun(author, 'From a paper')
    await go(page, `/curate/${id}?part=import`)
    const read = async () => {
      await choose(page, 'paper.csv', paper)
      await page.getByRole('combobox', { name: 'Colour is read as' }).waitFor()
      expect(await page.getByRole('combobox', { name: 'Level (cm-1) is read as' }).inputValue()).toBe('energy_invcm')
      await page.getByLabel('energy_source').fill('sansonetti-2008-na')
      await page.getByLabel('energy_evidence').selectOption('read')
      await page.getByRole('button', { name: 'Read it like this' }).click()
    }
    await read()
    await page.getByRole('button', { name: 'Import these 2 rows' }).waitFor({ timeout: 20_000 })
    await expect.poll(() => page.getByRole('table', { name: 'Rows of the file' }).innerText()).toMatch(/changed[\s\S]*new/)
    expect(await stored(author, id)).toEqual([])
    await page.getByRole('button', { name: 'Import these 2 rows' }).click()
    await page.getByRole('button', { name: 'See them in the table' }).waitFor({ timeout: 20_000 })
    expect((await stored(author, id)).map((change) => change.action).sort()).toEqual(['create', 'replace'])
    await read()
    await expect.poll(() => page.getByRole('main').innerText(), { timeout: 20_000 }).toMatch(/This file would change nothing/)
    await choose(page, 'wrong.csv', 'id,energy_literal\nNa-I.3,nonsense\n')
    await expect.poll(() => page.getByRole('table', { name: 'Rows of the file' }).innerText(), { timeout: 20_000 }).toMatch(/error/)
    expect(await page.getByRole('button', { name: /^Import these/ }).count()).toBe(0)
    await page.getByRole('link', { name: 'Table' }).click()
    await expect.poll(() => page.getByRole('grid').innerText()).toMatch(/36372\.618/)
    await author.context.close()
  })
})

describe.each<Theme>(['light', 'dark'])('in the %s theme', (theme) => {
  it('every part is accessible, and none scrolls sideways at 390 or 320 pixels', async () => {
    const author = await as('curator', { theme, width: 390, height: 844 })
    const { page } = author
    const id = await begun(author, `A look at everything, ${theme}`)
    await openTable(page, id)
    await typeInto(page, 'Na-I.3', 'Energy', '-3')
    await isSaved(page)
    await page.keyboard.press('ArrowUp')
    await expect.poll(() => panel(page)).toMatch(/Findings/)
    for (const path of ['/curate', `/curate/${id}?show=Na-I`, `/curate/${id}?part=review`, `/curate/${id}?part=import`]) {
      await page.setViewportSize({ width: 390, height: 844 })
      await go(page, path)
      expect(await accessibilityFindings(page), path).toEqual([])
      for (const width of [390, 320]) {
        await page.setViewportSize({ width, height: 844 })
        await drawn(page)
        expect(await overflow(page), `${path} at ${width}`).toBeLessThanOrEqual(0)
      }
    }
    await page.setViewportSize({ width: 1440, height: 900 })
    await openTable(page, id)
    expect(await accessibilityFindings(page)).toEqual([])
    expect(author.complaints).toEqual([])
    await author.context.close()
  })
})
