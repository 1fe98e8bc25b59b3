import { describe, expect, it } from 'vitest'
import { ConfigError, readConfig } from '../../server/config.ts'

const productionSecrets = { PUBLIC_URL: 'https://sixteenth.example.com', SESSION_SECRET: 'x'.repeat(32) }

function complaintsOf(environment: Record<string, string>): string[] {
  try {
    readConfig(environment)
  } catch (error) {
    if (error instanceof ConfigError) return error.complaints
    throw error
  }
  return []
}

describe('the environment', () => {
  it('may be empty on one’s own machine', () => {
    const config = readConfig({})
    expect(config).toMatchObject({ port: 3000, host: '127.0.0.1', isLoopback: true, checkRatePerMinute: 240 })
    expect(config.dataDir).toMatch(/[\\/]data$/)
    expect(config.trustProxy).toBe(false)
  })

  it('takes an empty value for none', () => {
    expect(readConfig({ PORT: '', HOST: '' })).toMatchObject({ port: 3000, host: '127.0.0.1' })
  })

  it('is told about everything that is wrong at once', () => {
    const complaints = complaintsOf({
      PORT: 'eighty',
      CHECK_RATE_PER_MINUTE: 'lots',
      TRUST_PROXY: 'true',
      PUBLIC_URL: 'sixteenth',
    })
    expect(complaints.map((line) => line.split(' ')[0]).sort()).toEqual([
      'CHECK_RATE_PER_MINUTE',
      'PORT',
      'PUBLIC_URL',
      'TRUST_PROXY',
    ])
  })

  it.each(['true', '::::', '10.0.0.0/', 'proxy.example.com', ''])('does not trust the proxy %j', (value) => {
    const complaints = complaintsOf({ TRUST_PROXY: value })
    expect(complaints).toHaveLength(value === '' ? 0 : 1)
    if (value === '') expect(readConfig({ TRUST_PROXY: value }).trustProxy).toBe(false)
  })

  it.each(['-1', '65536', '3000.5'])('has no port %s', (port) => {
    expect(complaintsOf({ PORT: port })).toHaveLength(1)
  })

  it('can switch the limit of checks off', () => {
    expect(readConfig({ CHECK_RATE_PER_MINUTE: 'off' }).checkRatePerMinute).toBeNull()
  })

  it('says which proxies to trust', () => {
    expect(readConfig({ TRUST_PROXY: '1' }).trustProxy).toBe(1)
    expect(readConfig({ TRUST_PROXY: '10.0.0.0/8,::1' }).trustProxy).toEqual(['10.0.0.0/8', '::1'])
  })

  it.each([
    ['127.0.0.1', true],
    ['127.8.0.1', true],
    ['localhost', true],
    ['::1', true],
    ['0.0.0.0', false],
    ['192.0.2.1', false],
    ['127.0.0.1.example.com', false],
  ])('with HOST %s is on its own machine: %s', (host, isLoopback) => {
    expect(readConfig({ HOST: host }).isLoopback).toBe(isLoopback)
  })

  it('in production wants its secrets and its address', () => {
    const complaints = complaintsOf({ NODE_ENV: 'production', SESSION_SECRET: 'short' })
    expect(complaints).toHaveLength(2)
    expect(complaints.join('\n')).toMatch(/SESSION_SECRET must have at least 32 characters/)
    expect(complaints.join('\n')).toMatch(/PUBLIC_URL is missing/)
    expect(complaintsOf({ NODE_ENV: 'production', ...productionSecrets })).toEqual([])
  })

  it.each([
    ['http://sixteenth.example.com', 1],
    ['http://192.0.2.1:3000', 1],
    ['https://192.0.2.1', 0],
    ['http://localhost:3000', 0],
    ['http://127.0.0.1', 0],
    ['http://[::1]:3000', 0],
  ])('in production is reached over TLS, but on its own machine: %s', (PUBLIC_URL, count) => {
    const complaints = complaintsOf({ NODE_ENV: 'production', ...productionSecrets, PUBLIC_URL })
    expect(complaints).toHaveLength(count)
    for (const complaint of complaints) expect(complaint).toMatch(/^PUBLIC_URL must begin with https/)
    expect(complaintsOf({ PUBLIC_URL })).toEqual([])
  })
})
