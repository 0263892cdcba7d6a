import { z } from 'zod'

/** Control characters, line breaks, marks that turn the direction of text, and characters of no width; joiners, which some scripts write with, stay. */
const UNSEEN = /^[^\u0000-\u001f\u007f-\u009f\u00ad\u061c\u180e\u200b\u200e\u200f\u2028-\u202e\u2060-\u206f\ufeff\ufff9-\ufffb]*$/

/** A name or title: text on one line, in which everything can be seen. */
export const oneLine = (max = 200) => z.string().trim().min(1).max(max).refine((text) => UNSEEN.test(text), 'Write it on one line, without control characters, invisible ones and marks of direction.')
