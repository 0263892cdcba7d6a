import type { Operation } from '@/openapi/core/define'
import { IMPORT_OPERATIONS } from '@/openapi/operations/imports'
import { PEOPLE_OPERATIONS } from '@/openapi/operations/people'
import { READING_OPERATIONS } from '@/openapi/operations/reading'

/** Every operation of the API, in the order of the documentation. */
export const OPERATIONS = [...READING_OPERATIONS, ...IMPORT_OPERATIONS, ...PEOPLE_OPERATIONS] as unknown as readonly Operation[]
