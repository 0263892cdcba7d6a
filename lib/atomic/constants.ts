// The numbers live in one file, lib/units/codata.ts, since unit conversion stands below the physics and needs h, c and e.
export * from '@/lib/units/codata'

/** Raised whenever a computed number can change, so that cached answers are not taken for new ones. */
export const PHYSICS_VERSION = 2
