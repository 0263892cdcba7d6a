import { defineConfig, globalIgnores } from 'eslint/config'
import nextVitals from 'eslint-config-next/core-web-vitals'
import nextTs from 'eslint-config-next/typescript'

// Who may know whom. Each room lists the only other rooms it may import from; an arrow that points up is an error.
const rooms = {
  'lib/units': [],
  'lib/atomic': ['lib/units'],
  'lib/problem': [],
  'lib/entity-tag': ['lib/problem'],
  'lib/config': ['lib/problem'],
  openapi: ['lib/atomic', 'lib/units', 'lib/problem'],
  db: ['lib/config'],
  'lib/mail': ['lib/config', 'openapi'],
  'lib/access': ['db', 'openapi', 'lib/problem', 'lib/entity-tag', 'lib/config'],
  'lib/catalogue': ['db', 'lib/atomic', 'lib/units', 'openapi', 'lib/problem', 'lib/config'],
  'lib/curation': ['db', 'lib/atomic', 'lib/units', 'openapi', 'lib/problem', 'lib/entity-tag', 'lib/config', 'lib/access', 'lib/catalogue'],
  'lib/prediction': ['db', 'lib/atomic', 'lib/units', 'openapi', 'lib/problem', 'lib/config', 'lib/catalogue'],
  'lib/notices': ['db', 'lib/atomic', 'lib/units', 'openapi', 'lib/problem', 'lib/config', 'lib/access', 'lib/catalogue', 'lib/prediction', 'lib/mail', 'lib/entity-tag'],
  'lib/http': ['openapi', 'lib/access', 'lib/problem', 'lib/entity-tag', 'lib/config', 'lib/units', 'lib/atomic'],
  // what others take away with them knows nothing of ours but its own generated types
  clients: [],
  seeds: ['db', 'lib/atomic', 'lib/units', 'lib/problem', 'lib/config', 'lib/access', 'lib/curation', 'openapi'],
}
const all = [...Object.keys(rooms), 'app', 'tests']
const zones = Object.entries(rooms).map(([room, may]) => {
  const from = all.filter((other) => other !== room && !may.includes(other))
  return {
    target: [`./${room}/**/*`, `./${room}.ts*`],
    from: from.flatMap((other) => [`./${other}/**/*`, `./${other}.ts*`]),
    message: `${room} may import only from ${may.length > 0 ? may.join(', ') : 'no other room'}.`,
  }
})

export default defineConfig([
  ...nextVitals,
  ...nextTs,
  {
    files: ['**/*.ts', '**/*.tsx'],
    rules: {
      'import/no-restricted-paths': ['error', { zones }],
      '@typescript-eslint/no-explicit-any': 'error',
    },
  },
  globalIgnores(['**/.next/**', 'next-env.d.ts', 'db/migrations/**', '.data/**', 'coverage/**', 'public/**']),
])
