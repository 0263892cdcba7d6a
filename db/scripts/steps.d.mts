// Types of steps.mjs, which is plain JavaScript because it runs before anything is installed.
import type { ChildProcess } from 'node:child_process'

export type Environment = Record<string, string>
interface RunOptions {
  env?: Environment
  capture?: boolean
  quiet?: boolean
}

export const root: string
export class StepError extends Error {}
export function say(message: string): void
export function endWithChildren(): void
export function run(command: string, args: readonly string[], options?: RunOptions): Promise<string>
export function node(args: readonly string[], options?: RunOptions): Promise<string>
export function checkNode(): void
export function checkListen(host: string, port: string): Promise<void>
export function dataFolder(): void
export function install(): Promise<void>
export function database(name: string, options?: { fresh?: boolean }): Promise<Environment>
export function releaseDatabase(): Promise<unknown> | undefined
export function migrate(env: Environment): Promise<string>
export function seed(env: Environment): Promise<string>
export function sourcesStamp(): string
export function isBuilt(): boolean
export function build(): Promise<void>
export function sessionSecret(file: string): string
export function keepsMail(host: string): boolean
export function mailStandIn(folder: string): Promise<{ child: ChildProcess; env: Environment }>
export function serve(host: string, port: string, env: Environment): Promise<{ child: ChildProcess; base: string }>
export function endServer(child: ChildProcess): Promise<void>
export function freePort(): Promise<string>
