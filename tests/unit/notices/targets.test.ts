import fc from 'fast-check'
import ipaddr from 'ipaddr.js'
import { describe, expect, it } from 'vitest'
import { isPublicAddress, judgeTarget, readTarget } from '@/lib/notices/targets'

const PUBLIC = ['1.1.1.1', '8.8.8.8', '93.184.215.14', '11.0.0.1', '126.255.255.255', '128.0.0.1', '169.253.0.1', '172.15.255.255', '172.32.0.1', '192.167.255.255', '100.63.255.255', '100.128.0.0', '223.255.255.255', '2606:4700:4700::1111', '2a00:1450:4001::200e', '2400:cb00::1']
const PRIVATE = [
  '0.0.0.0', '0.1.2.3', '127.0.0.1', '127.255.255.254', '10.0.0.1', '172.16.0.1', '172.31.255.255', '192.168.0.1', '169.254.169.254', '100.64.0.1', '100.127.255.255', '192.0.0.8', '192.0.2.1', '192.88.99.1',
  '198.18.0.1', '198.19.255.255', '198.51.100.7', '203.0.113.7', '224.0.0.1', '239.255.255.250', '240.0.0.1', '255.255.255.255',
  '::', '::1', '::ffff:127.0.0.1', '::ffff:8.8.8.8', '::ffff:0:8.8.8.8', '::127.0.0.1', '::8.8.8.8', '64:ff9b::7f00:1', '64:ff9b::808:808', '64:ff9b:1::1', '2002:7f00:1::', '2002:808:808::1', '2001::1', '2001:0:53aa:64c:0:fbff:f5f5:f5f5', '2001:db8::1',
  '2001:10::1', '2001:20::1', '2001:2::1', '3fff::1', 'fc00::1', 'fd12:3456::1', 'fe80::1', 'fec0::1', 'ff02::1', '100::1', '4000::1', '5f00::1',
]
const NONE = ['', 'localhost', '1.1.1', '0x7f000001', '2130706433', '1.1.1.1.1', '256.1.1.1', ' 1.1.1.1', '1.1.1.1\n', '[::1]', 'fe80::1%eth0', '::ffff:1.2.3', '01.02.03.04']

describe('public addresses', () => {
  it.each(PUBLIC)('%s is one', (address) => expect(isPublicAddress(address)).toBe(true))
  it.each(PRIVATE)('%s is none', (address) => expect(isPublicAddress(address)).toBe(false))
  it.each(NONE)('%j is no address', (address) => expect(isPublicAddress(address)).toBe(false))

  it('never carry an IPv4 address inside, whichever it is', () => {
    fc.assert(fc.property(fc.ipV4(), (inner) => {
      const [a = 0, b = 0, c = 0, d = 0] = inner.split('.').map(Number)
      const hex = `${((a << 8) | b).toString(16)}:${((c << 8) | d).toString(16)}`
      for (const outer of [`::ffff:${hex}`, `::ffff:0:${hex}`, `::${hex}`, `64:ff9b::${hex}`, `64:ff9b:1::${hex}`, `2002:${hex}::1`]) expect(isPublicAddress(outer), outer).toBe(false)
    }))
  })

  it('are of the ranges that were given out', () => {
    fc.assert(fc.property(fc.ipV6(), (address) => {
      if (isPublicAddress(address)) expect(ipaddr.parse(address).range()).toBe('unicast')
    }))
  })
})

describe('targets', () => {
  it('are read as browsers read them, so that other spellings of an address are that address', async () => {
    for (const host of ['2130706433', '0x7f000001', '0177.0.0.1', '127.1', '0x7f.0.0.1', '127.0.0.1.', '[::ffff:7f00:1]', '[0:0:0:0:0:0:0:1]', '%31%32%37.0.0.1', '１２７.0.0.1', '0', '0.0', '[::]']) {
      const read = readTarget(`http://${host}/`)
      if ('fault' in read) throw new Error(`${host}: ${read.fault}`)
      expect(await judgeTarget(read.url, false), host).toEqual({ refused: 'private' })
    }
  })

  it.each(['ftp://a.example/', 'gopher://a.example/', 'data:text/plain,x', 'https://u@a.example/', 'https://u:p@a.example/', 'https://:p@a.example/', '//a.example/', 'a.example', 'http://', 'http:///', 'http://a.example:70000/', 'http://[::1', 'http://a b.example/'])('%s is refused', (text) => {
    expect(readTarget(text)).toHaveProperty('fault')
  })

  const url = new URL('https://hooks.example/x')
  const found = (...addresses: string[]) => async () => addresses.map((address) => ({ address, family: address.includes(':') ? 6 : 4 }))

  it('need every address of their host to be public, and go to the first', async () => {
    expect(await judgeTarget(url, false, found('1.1.1.1', '2606:4700:4700::1111'))).toEqual({ address: { address: '1.1.1.1', family: 4 } })
    expect(await judgeTarget(url, false, found('1.1.1.1', '10.0.0.1'))).toEqual({ refused: 'private' })
    expect(await judgeTarget(url, false, found('1.1.1.1', '::ffff:10.0.0.1'))).toEqual({ refused: 'private' })
    expect(await judgeTarget(url, false, found())).toEqual({ refused: 'unresolved' })
    expect(await judgeTarget(url, false, () => Promise.reject(new Error('ENOTFOUND')))).toEqual({ refused: 'unresolved' })
    expect(await judgeTarget(url, true, found('10.0.0.1'))).toEqual({ address: { address: '10.0.0.1', family: 4 } })
  })
})
