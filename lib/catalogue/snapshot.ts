/** The door to editions held in memory: the shape of one, and how to get it. */
export { buildSnapshot } from '@/lib/catalogue/build'
export { closeCatalogue, editionExists, getSnapshot, latestEdition } from '@/lib/catalogue/cache'
export type { EditionContent, RetiredLevel, Snapshot, SnapshotColumns, TermMembers } from '@/lib/catalogue/shape'
