import { inject } from 'vitest'

// Before any module of the project reads its configuration.
Object.assign(process.env, inject('environment'))
