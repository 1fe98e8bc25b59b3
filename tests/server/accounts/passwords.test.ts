import { execFile } from 'node:child_process'
import { readFileSync } from 'node:fs'
import { promisify } from 'node:util'
import bcrypt from 'bcryptjs'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { readConfig } from '../../../server/config.ts'
import { isCommonPassword } from '../../../server/passwords/commonPasswords.ts'
import { createPasswordHasher } from '../../../server/services/passwords.ts'
import type { PasswordHasher } from '../../../server/services/passwords.ts'
import { postSignIn } from '../../support/accounts.ts'
import { readProblem } from '../../support/requests.ts'
import { startServer } from '../../support/server.ts'

const root = new URL('../../../', import.meta.url)

describe('passwords are hashed', () => {
  let hasher: PasswordHasher
  beforeEach(() => {
    hasher = createPasswordHasher(4, 1)
  })
  afterEach(() => hasher.close())

  it('with bcrypt at cost 12', async () => {
    const { passwordCost } = readConfig({
      NODE_ENV: 'production',
      PUBLIC_URL: 'https://a.example',
      SESSION_SECRET: 's'.repeat(32),
    })
    const real = createPasswordHasher(passwordCost)
    const hash = await real.hash('seven wet trailers')
    expect(bcrypt.getRounds(hash)).toBe(12)
    expect(await bcrypt.compare('seven wet trailers', hash)).toBe(true)
    await real.close()
  })

  it('while the server goes on with everything else', async () => {
    const real = createPasswordHasher(12, 1)
    await real.verify('started', null)
    let longestGapMs = 0
    let last = performance.now()
    const timer = setInterval(() => {
      longestGapMs = Math.max(longestGapMs, performance.now() - last)
      last = performance.now()
    }, 5)
    const start = performance.now()
    await Promise.all([1, 2, 3].map(() => real.verify('seven wet trailers', null)))
    const tookMs = performance.now() - start
    clearInterval(timer)
    await real.close()
    expect(longestGapMs).toBeLessThan(tookMs / 3)
  })

  it('so that nothing matches nobody', async () => {
    expect(await hasher.verify('', null)).toBe(false)
    expect(await hasher.verify('Sixteenth', null)).toBe(false)
  })

  it('never in part: more than bcrypt reads is refused, and does not pass for its beginning', async () => {
    await expect(hasher.hash('x'.repeat(73))).rejects.toThrow(RangeError)
    const hash = await hasher.hash('x'.repeat(72))
    expect(await hasher.verify('x'.repeat(72), hash)).toBe(true)
    expect(await bcrypt.compare('x'.repeat(73), hash)).toBe(true)
    expect(await hasher.verify('x'.repeat(73), hash)).toBe(false)
  })

  it('in a queue with an end, after which one is told to come again', async () => {
    const server = await startServer()
    const slow = createPasswordHasher(12, 1)
    const waiting = Array.from({ length: 65 }, () =>
      slow.verify('seven wet trailers', null).catch(() => null),
    )
    server.context.passwords = slow
    const response = await postSignIn(server, 'robin@ridge.test')
    expect(response.status).toBe(503)
    expect(Number(response.headers.get('retry-after'))).toBeGreaterThan(0)
    expect((await readProblem(response)).code).toBe('busy')
    // Closing answers whoever waits.
    await server.stop()
    expect(await Promise.all(waiting)).toContain(null)
  })

  it('again after the thread that did it has failed', async () => {
    const failing = createPasswordHasher(4, 1)
    await expect(failing.verify('seven wet trailers', undefined as never)).rejects.toThrow()
    expect(await failing.verify('seven wet trailers', await failing.hash('seven wet trailers'))).toBe(true)
    await failing.close()
  })

  it('by a server that runs its sources as they are, and that ends by itself', async () => {
    const script = `
      import { createPasswordHasher } from './server/services/passwords.ts'
      const hasher = createPasswordHasher(4)
      const keptAlive = setInterval(() => {}, 1000)
      console.log(await hasher.verify('a', await hasher.hash('a')))
      clearInterval(keptAlive)
    `
    const parameters = ['--import', 'tsx', '--input-type=module', '--eval', script]
    const { stdout } = await promisify(execFile)(process.execPath, parameters, { cwd: root, timeout: 30_000 })
    expect(stdout.trim()).toBe('true')
  })
})

describe('a password is too common', () => {
  it.each([
    'password123',
    'Password1234',
    'P@ssw0rd2024!',
    'p4ssw0rd!!',
    '123password',
    'pass-word-123',
    'passwordpassword',
    '1234567890',
    '0987654321',
    '12345678910',
    'qwertyuiop',
    'QWERTYUIOP1',
    'asdfghjkl;1',
    '1q2w3e4r5t',
    '1qaz2wsx3edc',
    'zxcvbnm123',
    'abcdefghij',
    'abcd1234efgh',
    'aaaaaaaaaa',
    'aaaaaaaaab',
    '1212121212',
    'abcabcabcabc',
    '!!!!!!!!!!!!',
    'iloveyou12',
    '1l0vey0u123',
    'letmein2024',
    'Welcome2026!',
    'Summer2025!!',
    'administrator',
    'basketball',
    'sunshine!23',
    'michelle1990',
    'correcthorsebatterystaple',
    'trustno1trustno1',
    'contraseña123',
    'Contrasena2025',
    'teamomucho',
    'futbol2024!',
    'sandblaster',
    'compressor1',
    'sixteenth1',
    'S1xteenth2026',
    'dragon  dragon',
    'monkey12monkey12',
  ])('such as %s', (password) => {
    expect(isCommonPassword(password)).toBe(true)
  })

  it.each([
    ['RobinVale1', 'Robin Vale'],
    ['vale.robin.77', 'Robin Vale'],
    ['robin@ridge.test', 'robin@ridge.test'],
    ['ridgeline2026!', 'Ridge Line Blasting'],
    ['R1dgeL1ne99', 'Ridge Line Blasting'],
    ['ÁngelaPeña1', 'Angela Pena'],
  ])('when it is made of one’s own words: %s', (password, own) => {
    expect(isCommonPassword(password, [own])).toBe(true)
  })

  it.each([
    'seven wet trailers',
    'tPq7#kz0Lm',
    'xk4-vbe9-qwz2',
    'kestrel over a yard',
    'la manguera vieja no aguanta',
    '9f3b1c77d0a24e58',
    'Mud&Garnet in May',
    '83b purple winch',
    'gravel-tuba-onion',
    'ñandú con botas',
    '密码是一只鸟飞过山',
    '7#$%&!^*(@K+',
    '🐢🎺🌵🧲🪁🧀🚲🪵🎈🧦',
  ])('but not %s', (password) => {
    expect(isCommonPassword(password, ['Robin Vale', 'robin@ridge.test', 'Ridge Line Blasting'])).toBe(false)
  })

  it('wherever the shipped list has it, in capitals, disguised, or with a number behind', () => {
    const text = readFileSync(new URL('server/passwords/commonPasswords.txt', root), 'utf8')
    const listed = text.split('\n').filter((line) => line !== '' && !line.startsWith('#'))
    expect(listed.filter((word) => [...word].length >= 10).length).toBeGreaterThan(2000)
    const disguise = (word: string) => word.replaceAll('o', '0').replaceAll('a', '@').replaceAll('e', '3')
    const dressings = [
      (word: string) => word.toUpperCase(),
      (word: string) => `${word}2026!`,
      (word: string) => `1${word}`,
      (word: string) => (/^[a-z]+$/.test(word) ? disguise(word) : word),
    ]
    const passed = listed.filter((word) => !dressings.every((dress) => isCommonPassword(dress(word))))
    expect(passed).toEqual([])
  })

  it('and is told to be in a moment, whatever is asked', () => {
    const start = performance.now()
    for (let count = 0; count < 100; count += 1) {
      isCommonPassword('password'.repeat(9), ['ab '.repeat(20), `${'a'.repeat(60)}@ridge.test`])
    }
    expect((performance.now() - start) / 100).toBeLessThan(20)
  })
})
