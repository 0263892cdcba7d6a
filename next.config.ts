import type { NextConfig } from 'next'

const config: NextConfig = {
  poweredByHeader: false,
  reactStrictMode: true,
  agentRules: false,
  // Types are looked at once, over everything and the tests too, by npm test; a build need not do it again.
  typescript: { ignoreBuildErrors: true },
  experimental: { agentUpgrade: false },
  // The API sends its own validators and caching fields; Next's page ETags stay on.
  serverExternalPackages: ['@citation-js/core', '@citation-js/plugin-bibtex', 'pg', 'pino', '@node-rs/argon2', 'nodemailer'],
}
export default config
