import type { TestProject } from 'vitest/node'
import { setUp } from './environment'

/** For projects that ask a running server. */
export const setup = (project: TestProject) => setUp(project, { server: true })
export default setup
