const MINUTE = 60_000
const PAUSES = [1, 5, 15, 60, 240, 720, 1440].map((minutes) => minutes * MINUTE)

/** After this many attempts a mail or delivery is given up. */
export const MOST_ATTEMPTS = PAUSES.length + 1

/** Milliseconds from the `attempts`-th failure to the next attempt: a minute at first, a day at last; null where there is no next. */
export const pauseAfter = (attempts: number): number | null => (attempts >= MOST_ATTEMPTS ? null : (PAUSES[Math.max(0, attempts - 1)] ?? null))
