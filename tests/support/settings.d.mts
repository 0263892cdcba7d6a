import type { ChildProcess } from 'node:child_process'
import type { Environment } from '../../db/scripts/steps.mjs'

export const folder: string
export const DATABASE: string
export function testDatabase(): Promise<Environment>
export function testServer(env: Environment): Promise<{ child: ChildProcess; env: Environment }>
