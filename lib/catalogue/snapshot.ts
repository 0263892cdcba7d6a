/** The door to editions held in memory: the shape of one, and how to get it. */
export type { RetiredLevel, Snapshot, SnapshotColumns, TermMembers } from '@/lib/catalogue/shape'
