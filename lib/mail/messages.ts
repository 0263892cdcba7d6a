import { getConfig } from '@/lib/config'
import { oneLine, quotation } from '@/lib/mail/text'

export interface Message { subject: string; text: string }

const page = (path: string): string => `${getConfig().baseUrl}${path}`
/** Times in mail are in UTC, since a mail does not know where it is read. */
const moment = (iso: string): string => `${iso.slice(0, 10)} ${iso.slice(11, 16)} UTC`
const message = (subject: string, ...parts: string[]): Message => ({ subject: oneLine(subject, 250), text: parts.filter((part) => part !== '').join('\n\n') })

export function invitationMail(given: { name: string; role: string; by: string; expires_at: string; token: string }): Message {
  return message(
    'Your invitation to Lodeterm',
    `Hello ${oneLine(given.name)},`,
    `${oneLine(given.by)} invites you to Lodeterm, a reviewed table of atomic levels, with the role ${oneLine(given.role)}.`,
    `Open this link, choose a password, and you are in:\n${page(`/invitation?token=${encodeURIComponent(given.token)}`)}`,
    `It works once, until ${moment(given.expires_at)}. If you did not expect this, leave it: without the link nothing happens.`,
  )
}

export function resetMail(given: { name: string; expires_at: string; token: string }): Message {
  return message(
    'Set a new password for Lodeterm',
    `Hello ${oneLine(given.name)},`,
    `somebody, probably you, asked for a new password for your account at ${page('/')}.`,
    `Set it here:\n${page(`/reset-password?token=${encodeURIComponent(given.token)}`)}`,
    `The link works once, until ${moment(given.expires_at)}, and only the newest one works. Every browser that is signed in will have to sign in again; API keys go on working.`,
    'If it was not you, leave this mail: your password stays as it is.',
  )
}

/** For the owner, who may not be the one who did it: what happened, and what to do then. */
export function passwordChangedMail(given: { name: string; by: 'session' | 'link'; at: string }): Message {
  return message(
    'Your password for Lodeterm was changed',
    `Hello ${oneLine(given.name)},`,
    `the password of your account at ${page('/')} was changed on ${moment(given.at)}, ${given.by === 'session' ? 'by somebody who was signed in and knew the one before' : 'by the link of a mail that was sent to this address'}.`,
    `${given.by === 'session' ? 'Every other browser' : 'Every browser'} that was signed in has to sign in again; API keys go on working.`,
    'If it was you, there is nothing to do.',
    `If it was not, set a new one at once:\n${page('/reset-password')}\nThen look through your API keys, revoke those that you do not know, and tell an admin:\n${page('/account')}`,
  )
}

export interface ReviewNews { amendment: string; title: string; by: { name: string }; comment: string | null }
const amendmentPage = (id: string): string => page(`/curate/${encodeURIComponent(id)}`)
const said = (who: string, comment: string | null): string => (comment === null || comment.trim() === '' ? '' : `${oneLine(who)} wrote:\n${quotation(comment)}`)

export function reviewAskedMail(name: string, review: ReviewNews): Message {
  return message(
    `Review asked: ${oneLine(review.title)}`,
    `Hello ${oneLine(name)},`,
    `${oneLine(review.by.name)} asks for a review of the amendment "${oneLine(review.title)}". You wrote none of it, so you may accept or return it.`,
    said(review.by.name, review.comment),
    `Review it here: ${amendmentPage(review.amendment)}?part=review`,
  )
}

export function reviewGivenMail(name: string, outcome: 'returned' | 'accepted', review: ReviewNews): Message {
  return message(
    `${outcome === 'accepted' ? 'Accepted' : 'Returned'}: ${oneLine(review.title)}`,
    `Hello ${oneLine(name)},`,
    outcome === 'accepted'
      ? `${oneLine(review.by.name)} accepted the amendment "${oneLine(review.title)}". It goes into the next edition; a change made before that sends it back to draft.`
      : `${oneLine(review.by.name)} returned the amendment "${oneLine(review.title)}". It is a draft again, and can be mended and submitted anew.`,
    said(review.by.name, review.comment),
    `The amendment: ${amendmentPage(review.amendment)}`,
  )
}
