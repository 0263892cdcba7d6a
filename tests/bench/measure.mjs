import http from 'node:http'
import { gzipSync } from 'node:zlib'

/** One connection, kept open; requests one after another. */
export class Connection {
  constructor(base) {
    this.base = new URL(base)
    this.agent = new http.Agent({ keepAlive: true, maxSockets: 1 })
  }

  /** Milliseconds from asking to the last byte; refuses anything but 200. */
  time({ path, headers }) {
    return new Promise((resolve, reject) => {
      const from = performance.now()
      const request = http.request({ host: this.base.hostname, port: this.base.port, path, headers, agent: this.agent }, (response) => {
        response.on('data', () => undefined)
        response.on('end', () => {
          const took = performance.now() - from
          if (response.statusCode === 200) resolve(took)
          else reject(new Error(`${path} answered ${response.statusCode}`))
        })
      })
      request.on('error', reject)
      request.end()
    })
  }

  close() {
    this.agent.destroy()
  }
}

export function median(list) {
  const sorted = [...list].sort((a, b) => a - b)
  return sorted[Math.floor(sorted.length / 2)]
}

/** The scripts that a page names in its HTML (module scripts only: `nomodule` ones are for browsers that know no modules), gzip at level 9. */
export async function scriptBytes(base, path) {
  const html = await (await fetch(new URL(path, base))).text()
  const addresses = new Set()
  for (const [tag] of html.matchAll(/<(?:script|link)\b[^>]*>/g)) {
    const isScript = tag.startsWith('<script') && !/\bnomodule\b/i.test(tag)
    const isPreload = tag.startsWith('<link') && /rel="(?:modulepreload|preload)"/.test(tag) && /as="script"|modulepreload/.test(tag)
    const address = /\b(?:src|href)="([^"]+)"/.exec(tag)?.[1]
    if ((isScript || isPreload) && address) addresses.add(address.replaceAll('&amp;', '&'))
  }
  let bytes = 0
  for (const address of addresses) bytes += gzipSync(Buffer.from(await (await fetch(new URL(address, base))).arrayBuffer()), { level: 9 }).byteLength
  return { files: addresses.size, bytes }
}
