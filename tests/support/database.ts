import type { TestProject } from 'vitest/node'
import { setUp } from './environment'

/** For projects that work on the database itself. */
export const setup = (project: TestProject) => setUp(project, { server: false })
export default setup
