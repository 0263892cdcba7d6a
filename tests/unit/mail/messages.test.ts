import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { editionMail, type FollowedNews, lineText } from '@/lib/mail/edition-mail'
import { invitationMail, passwordChangedMail, resetMail, reviewAskedMail, reviewGivenMail } from '@/lib/mail/messages'
import { oneLine, quotation } from '@/lib/mail/text'

const BASE = 'http://127.0.0.1:3000'
const review = { amendment: '00000000-0000-4000-8000-000000000000', title: 'Sodium energies', by: { name: 'Ada' }, comment: 'Please look at the second line.\nThank you.' }

describe('text from people', () => {
  it('stays on one line in a subject, whatever it holds', () => {
    fc.assert(fc.property(fc.string({ unit: 'binary', maxLength: 400 }), (text) => {
      const { subject } = reviewAskedMail('x', { ...review, title: text })
      expect(subject).not.toMatch(/[\p{Cc}\p{Zl}\p{Zp}\u202a-\u202e\u2066-\u2069]/u)
      expect([...oneLine(text)].length).toBeLessThanOrEqual(200)
    }))
    expect(oneLine('a\r\nBcc: b@c.example\u2028x\u202ey')).toBe('a Bcc: b@c.example x y')
  })

  it('is marked line by line where it is quoted', () => {
    fc.assert(fc.property(fc.string({ unit: 'binary', maxLength: 400 }), (text) => {
      for (const line of quotation(text).split('\n')) expect(line.startsWith('>')).toBe(true)
    }))
    expect(quotation('x'.repeat(10_000)).length).toBeLessThan(4100)
  })
})

describe('messages', () => {
  it('invite, with a link from the configured address', () => {
    const { subject, text } = invitationMail({ name: 'Jun', role: 'curator', by: 'Ada', expires_at: '2030-01-31T12:00:00.000Z', token: 'a-b_c' })
    expect(subject).toBe('Your invitation to Lodeterm')
    expect(text).toContain(`${BASE}/invitation?token=a-b_c`)
    expect(text).toContain('Ada invites you')
    expect(text).toContain('until 2030-01-31 12:00 UTC')
  })

  it('let a password be set', () => {
    const { subject, text } = resetMail({ name: 'Jun', expires_at: '2030-01-31T12:00:00.000Z', token: 'tok' })
    expect(subject).toBe('Set a new password for Lodeterm')
    expect(text).toContain(`${BASE}/reset-password?token=tok`)
    expect(text).toContain('If it was not you')
  })

  it('tell of a changed password, with what to do where it was somebody else', () => {
    const given = { name: 'Jun', at: '2030-01-31T12:00:00.000Z' }
    const { subject, text } = passwordChangedMail({ ...given, by: 'session' })
    expect(subject).toBe('Your password for Lodeterm was changed')
    expect(text).toContain('on 2030-01-31 12:00 UTC, by somebody who was signed in')
    expect(text).toContain(`${BASE}/reset-password\n`)
    expect(text).toContain(`${BASE}/account`)
    expect(text).not.toContain('token')
    expect(passwordChangedMail({ ...given, by: 'link' }).text).toContain('by the link of a mail')
  })

  it('tell of reviews with what was written', () => {
    const asked = reviewAskedMail('Jun', review)
    expect(asked.subject).toBe('Review asked: Sodium energies')
    expect(asked.text).toContain('> Please look at the second line.\n> Thank you.')
    expect(asked.text).toContain(review.amendment)
    expect(reviewGivenMail('Jun', 'accepted', { ...review, comment: null }).text).not.toContain('wrote:')
    expect(reviewGivenMail('Jun', 'returned', review).subject).toBe('Returned: Sodium energies')
  })
})

describe('the mail about an edition', () => {
  const before = { wavenumber: 16973.36619, nm: 588.99509, medium: 'air', gEff: 7 / 6 }
  const line = { id: 'Na-I.1~Na-I.3', before, after: { ...before, wavenumber: 16973.37, nm: 588.994958 } }
  const level: FollowedNews = {
    kind: 'level', subject: 'Na-I.3', fields: [], moreLevels: {}, line: null,
    levels: [{ id: 'Na-I.3', state: 'changed', fields: [{ name: 'energy', before: '16973.36619 cm^-1', after: '16973.37 cm^-1' }], reason: null, successor: null, lines: [line], moreLines: 2 }],
  }
  const retired: FollowedNews = { kind: 'line', subject: 'Na-I.1~Na-I.9', fields: [], moreLevels: {}, line: { id: 'Na-I.1~Na-I.9', before, after: null }, levels: [{ id: 'Na-I.9', state: 'retired', fields: [], reason: 'never seen again', successor: 'Na-I.12', lines: [], moreLines: 0 }] }
  const edition = { edition: 2, label: 'Spring', since: 1 }

  it('tells values and lines before and after', () => {
    const { subject, text } = editionMail(edition, 'Jun', [level, retired])
    expect(subject).toBe('Edition 2 changes Na-I.3, Na-I.1~Na-I.9')
    expect(text).toContain('energy: 16973.36619 cm^-1 -> 16973.37 cm^-1')
    expect(text).toContain('Na-I.1~Na-I.3  588.99509 nm (air) -> 588.99496 nm (air), moved by -0.132 pm (+0.00381 cm^-1)')
    expect(text).toContain('and 2 more')
    expect(text).toContain('Na-I.9 is retired: never seen again')
    expect(text).toContain(`Its successor is Na-I.12: ${BASE}/levels/Na-I.12`)
    expect(text).toContain(`${BASE}/editions/compare?from=1&to=2`)
    expect(text).toContain(`${BASE}/following`)
  })

  it('shows a move of any size with digits that mean something', () => {
    expect(lineText(line)).toMatch(/moved by -0\.132 pm/)
    expect(lineText({ ...line, after: { ...before, nm: 588.9950900001, wavenumber: 16973.36618999 } })).toContain('moved by +1.00e-7 pm (-1.00e-8 cm^-1)')
    expect(lineText({ ...line, after: { ...before, gEff: 1.2 } })).toContain('not moved, g_eff 1.166667 -> 1.200000')
    expect(lineText({ ...line, before: null })).toContain('new')
  })

  it('counts what it does not tell one by one, and says where that stands', () => {
    const { text } = editionMail(edition, 'Jun', [{ ...level, kind: 'species', subject: 'Na-I', moreLevels: { changed: 1900, new: 40, retired: 10 } }])
    expect(text).toContain(`and 1950 more levels (1900 changed, 40 new, 10 retired): ${BASE}/editions/compare?from=1&to=2`)
  })

  it('tells authors and reviewers of their amendments, with or without things followed', () => {
    const [mine, theirs] = [{ id: 'one', title: 'Sodium\u2028energies', part: 'author' as const }, { id: 'two', title: 'Iron', part: 'reviewer' as const }]
    const alone = editionMail(edition, 'Jun', [], [mine])
    expect(alone.subject).toBe('Your amendment "Sodium energies" is published in edition 2')
    expect(alone.text).toContain(`Your amendment "Sodium energies" is published in edition 2: ${BASE}/curate/one`)
    expect(alone.text).not.toContain('follow')
    const both = editionMail(edition, 'Jun', [level], [mine, theirs])
    expect(both.subject).toBe('Edition 2 changes Na-I.3, and holds your amendment "Sodium energies" and 1 more')
    expect(both.text).toContain('The amendment "Iron", which you reviewed, is published in edition 2')
    expect(both.text).toContain('energy: 16973.36619 cm^-1 -> 16973.37 cm^-1')
  })

  it('is bounded even where one thing followed says more than a mail holds', () => {
    const wordy = Array.from({ length: 50 }, () => ({ ...level.levels[0], fields: Array.from({ length: 30 }, () => ({ name: 'note', before: 'x'.repeat(400), after: 'y'.repeat(400) })) }))
    const { text } = editionMail(edition, 'Jun', [{ ...level, kind: 'species', subject: 'Na-I', levels: wordy as FollowedNews['levels'] }])
    expect(text.length).toBeLessThan(110_000)
    expect(text).toContain(`and more: ${BASE}/editions/compare?from=1&to=2`)
  })

  it('stays short, however much is followed', () => {
    const { subject, text } = editionMail(edition, 'Jun', Array.from({ length: 500 }, () => level))
    expect(subject).toContain('and 497 more')
    expect(text).toContain('and 400 more things')
    expect(text.length).toBeLessThan(60_000)
  })
})
