import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { ownPath } from '../../../src/router/ownPath.ts'

const origin = 'https://sixteenth.example'

describe('where signing in leads', () => {
  test.each(['/', '/rigs', '/rigs/3f2a?from=check', '/check#1.abc', '/people?next=%2Faudit'])(
    'to the page that was asked for: %s',
    (path) => expect(ownPath(path, origin)).toBe(path),
  )

  test.each([
    '//evil.example',
    '///evil.example',
    '/\\evil.example',
    '\\\\evil.example',
    '\\/evil.example',
    '/\t/evil.example',
    '/\n/evil.example',
    '/\r\n/evil.example',
    ' //evil.example',
    '/ /evil.example',
    '/\u0000/evil.example',
    '/\u00a0/evil.example',
    '/.//evil.example',
    '/..//evil.example',
    '/rigs/..//evil.example',
    '/%2e//evil.example',
    '/%2E%2e//evil.example',
    'https://evil.example',
    'https:evil.example',
    'http://sixteenth.example.evil.example/',
    'https://sixteenth.example@evil.example/',
    'javascript:alert(1)',
    'JaVaScRiPt:alert(1)',
    'java\nscript:alert(1)',
    'data:text/html,x',
    '@evil.example',
    'rigs',
    '?next=/rigs',
    '#rigs',
    '',
  ])('never elsewhere: %j', (asked) => expect(ownPath(asked, origin)).toBeNull())

  test('what is encoded stays a path of ours', () => {
    for (const asked of ['/%2F%2Fevil.example', '/%5Cevil.example', '/%09/evil.example', '/%00'])
      expect(new URL(ownPath(asked, origin) ?? '/', origin).origin).toBe(origin)
  })

  test.each([[undefined], [null], [['/rigs', '//evil.example']], [3]])(
    'nor to what is no text: %j',
    (asked) => expect(ownPath(asked, origin)).toBeNull(),
  )

  test('whatever is asked for, a browser stays here with it', () => {
    const piece = fc.constantFrom(
      '/',
      '\\',
      '.',
      '..',
      '%2f',
      '%5c',
      ':',
      '@',
      '\t',
      ' ',
      'evil.example',
      '?',
      '#',
      'https',
    )
    fc.assert(
      fc.property(fc.array(piece, { maxLength: 8 }), fc.string({ maxLength: 4 }), (pieces, tail) => {
        const found = ownPath(`/${pieces.join('')}${tail}`, origin)
        if (found === null) return
        const place = new URL(found, origin)
        expect(place.origin).toBe(origin)
        expect(found.startsWith('//')).toBe(false)
        // as a browser reads it once it stands in the address
        expect(new URL(place.pathname, origin).origin).toBe(origin)
      }),
      { numRuns: 3000, seed: 16 },
    )
  })
})
