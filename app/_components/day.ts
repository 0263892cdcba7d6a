const DAY = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'long', year: 'numeric', timeZone: 'UTC' })
const MOMENT = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'long', year: 'numeric', hour: '2-digit', minute: '2-digit', timeZone: 'UTC' })

/** Dates in UTC, so that the server and every reader see the same day. */
export const day = (iso: string): string => DAY.format(new Date(iso))
export const moment = (iso: string): string => `${MOMENT.format(new Date(iso))} UTC`
