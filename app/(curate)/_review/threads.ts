import type { Comment } from '@/openapi/schemas/amendment'

export interface Thread { first: Comment; answers: Comment[]; open: boolean }

/** Comments as threads, in the order they were begun; answers whose beginning is not there stand for themselves. */
export function threadsOf(comments: readonly Comment[]): Thread[] {
  const sorted = [...comments].sort((a, b) => a.created_at.localeCompare(b.created_at))
  const threads = new Map<string, Thread>()
  for (const comment of sorted) {
    const thread = comment.thread === null ? undefined : threads.get(comment.thread)
    if (thread !== undefined) thread.answers.push(comment)
    else threads.set(comment.id, { first: comment, answers: [], open: comment.resolved_at === null })
  }
  return [...threads.values()]
}

/** The threads about one change, or (null) about the amendment as a whole. */
export const threadsAbout = (threads: readonly Thread[], change: string | null): Thread[] => threads.filter((thread) => thread.first.change === change)
