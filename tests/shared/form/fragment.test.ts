import fc from 'fast-check'
import { afterEach, describe, expect, it } from 'vitest'
import { createCheckForm, createOutlet } from '#shared/form/checkForm.ts'
import { readFragment, writeFragment } from '#shared/form/fragment.ts'
import { anyText, arbitraryForm, freezeDeeply, typedTextsOf } from './randomForms.ts'

/** A fragment that says anything, as a stranger would make one: base64 for addresses of UTF-8 JSON. */
const fragmentOf = (said: unknown) => fragmentOfText(JSON.stringify(said))
const fragmentOfText = (text: string) => `1.${Buffer.from(text, 'utf8').toString('base64url')}`

function expectRefused(fragment: string) {
  expect(readFragment(fragment)).toEqual({ form: createCheckForm(), isBroken: true })
}

afterEach(() => {
  expect(Object.keys(Object.prototype)).toEqual([])
  expect(({} as Record<string, unknown>).polluted).toBeUndefined()
})

describe('a check in an address', () => {
  it('is nothing for the rig a visitor finds', () => {
    expect(writeFragment(createCheckForm())).toBe('')
    for (const empty of ['', '#']) {
      expect(readFragment(empty)).toEqual({ form: createCheckForm(), isBroken: false })
    }
  })

  it('comes back as it was typed, whatever was typed', () => {
    fc.assert(
      fc.property(arbitraryForm(anyText), (form) => {
        const fragment = writeFragment(freezeDeeply(form))
        expect(fragment).toMatch(/^[A-Za-z0-9._-]*$/)
        expect(readFragment(`#${fragment}`)).toEqual({ form, isBroken: false })
        expect(readFragment(fragment)).toEqual({ form, isBroken: false })
      }),
      { numRuns: 500 },
    )
  })

  it.each(['½ in', '7 bar', '第七', '🧰🧰', 'e\u0301', '\u0000', '\ud800', '"\\', '%41', '<b>', 'No. 7#1.'])(
    'keeps %j',
    (text) => {
      const form = createCheckForm()
      form.target.text = text
      expect(readFragment(writeFragment(form))).toEqual({ form, isBroken: false })
    },
  )

  it('keeps as much as a field takes, in every field of four nozzles', () => {
    const form = createCheckForm()
    form.outlets = [createOutlet(), createOutlet(), createOutlet(), createOutlet()]
    form.compressor.curve = Array.from({ length: 20 }, () => ({
      pressure: { text: '', system: 'us' },
      freeAir: { text: '', system: 'us' },
    }))
    const texts = typedTextsOf(form)
    for (const typed of texts)
      typed.text = '1/2 in, or so we think it was on Monday, as far as known'.padEnd(60)
    expect(texts.length).toBeGreaterThan(100)
    expect(readFragment(writeFragment(form))).toEqual({ form, isBroken: false })
  })

  it('is short where little was changed', () => {
    const form = createCheckForm()
    form.outlets[0]!.boreNow.text = '1/2'
    expect(writeFragment(form).length).toBeLessThan(80)
  })

  it('reads base64 as others write it', () => {
    const said = { target: { text: '90 psi' }, site: { altitude: { text: '5280 ft' } } }
    const { form, isBroken } = readFragment(fragmentOf(said))
    expect(isBroken).toBe(false)
    expect(form.target).toEqual({ text: '90 psi', system: 'us' })
    expect(form.site.altitude.text).toBe('5280 ft')
  })
})

describe('a broken or hostile address opens a clean check', () => {
  it.each([
    ['another page’s anchor', '#main'],
    ['a later shape', '2.e30'],
    ['no letters of ours', '1.***'],
    ['half a letter group', '1.e'],
    ['not JSON', fragmentOfText('{"target":')],
    ['not UTF-8', '1._____w'],
    ['nothing', '1.'],
    ['null', fragmentOf(null)],
    ['a list', fragmentOf([])],
    ['a number', fragmentOf(3)],
    ['a text', fragmentOf('target')],
    ['a number for a text', fragmentOf({ target: { text: 90 } })],
    ['null for a text', fragmentOf({ target: { text: null } })],
    ['a text for an object', fragmentOf({ target: '90 psi' })],
    ['an object for a text', fragmentOf({ target: { text: { toString: '90' } } })],
    ['a list for an object', fragmentOf({ compressor: [] })],
    ['an object for a list', fragmentOf({ outlets: { 0: {}, length: 1 } })],
    ['a number for yes or no', fragmentOf({ pot: { isUsed: 1 } })],
    ['a text for a number', fragmentOf({ airLine: { couplings: '2' } })],
    ['half a coupling', fragmentOf({ airLine: { couplings: 1.5 } })],
    ['a negative count', fragmentOf({ hoods: { count: -1 } })],
    ['a great many couplings', fragmentOf({ airLine: { couplings: 1e9 } })],
    ['more hoods than a check takes', fragmentOf({ hoods: { count: 8 } })],
    ['an unknown key', fragmentOf({ colour: 'red' })],
    ['an unknown key further in', fragmentOf({ site: { barometer: { text: '1' } } })],
    ['an unknown choice', fragmentOf({ compressor: { engine: 'steam' } })],
    ['an unknown unit system', fragmentOf({ target: { system: 'imperial' } })],
    ['an unknown bit set', fragmentOf({ bitSet: 'toString' })],
    ['an unknown abrasive', fragmentOf({ hour: { abrasive: 'moon-dust' } })],
    ['no nozzle', fragmentOf({ outlets: [] })],
    ['five nozzles', fragmentOf({ outlets: [{}, {}, {}, {}, {}] })],
    ['a nozzle that is null', fragmentOf({ outlets: [null] })],
    ['a long curve', fragmentOf({ compressor: { curve: Array.from({ length: 21 }, () => ({})) } })],
    ['a long text', fragmentOf({ target: { text: '9'.repeat(61) } })],
    ['a very long fragment', `1.${'e'.repeat(2_000_000)}`],
    ['a prototype', fragmentOfText('{"__proto__":{"polluted":true}}')],
    ['a prototype further in', fragmentOfText('{"site":{"__proto__":{"polluted":true}}}')],
    ['a prototype in a nozzle', fragmentOfText('{"outlets":[{"__proto__":{"polluted":true}}]}')],
    ['a constructor', fragmentOfText('{"constructor":{"prototype":{"polluted":true}}}')],
    ['an inherited name', fragmentOf({ toString: 'x' })],
    ['deep nesting', fragmentOfText('['.repeat(4000) + ']'.repeat(4000))],
    [
      'deep nesting in a nozzle',
      fragmentOfText(`{"outlets":[{"hose":${'{"hose":'.repeat(500)}1${'}'.repeat(500)}}]}`),
    ],
  ])('%s', (_, fragment) => {
    expectRefused(fragment)
  })

  it('whatever the characters are', () => {
    fc.assert(
      fc.property(
        fc.oneof(
          fc.string({ unit: 'binary' }),
          fc.base64String().map((text) => `1.${text}`),
        ),
        (text) => {
          fc.pre(text.replace(/^#/, '') !== '')
          expectRefused(text)
        },
      ),
      { numRuns: 2000 },
    )
  })

  it('whatever the JSON says', () => {
    const known = fc.constantFrom(
      'target',
      'text',
      'system',
      'outlets',
      'hose',
      'pot',
      'hour',
      'compressor',
      '__proto__',
    )
    const { said } = fc.letrec((tie) => ({
      said: fc.oneof(
        { maxDepth: 5 },
        fc.constantFrom('', 'us', 'bare', '90 psi'),
        fc.oneof(fc.integer(), fc.boolean(), fc.constant(null), fc.double()),
        fc.array(tie('said'), { maxLength: 5 }),
        fc
          .array(fc.tuple(fc.oneof(known, fc.string()), tie('said')), { maxLength: 4 })
          .map(
            (pairs) =>
              `{${pairs.map(([key, part]) => `${JSON.stringify(key)}:${JSON.stringify(part)}`).join()}}`,
          )
          .map((text) => JSON.parse(text) as unknown),
      ),
    }))
    const shapeOf = (value: unknown): unknown =>
      value === null || typeof value !== 'object'
        ? typeof value
        : Object.fromEntries(Object.entries(value).map(([key, part]) => [key, shapeOf(part)]))
    const oneOutlet = (value: ReturnType<typeof createCheckForm>) => ({
      ...value,
      outlets: value.outlets.slice(0, 1),
      compressor: { ...value.compressor, curve: [] },
    })
    fc.assert(
      fc.property(said, (value) => {
        const { form, isBroken } = readFragment(fragmentOf(value))
        if (isBroken) expect(form).toEqual(createCheckForm())
        else expect(shapeOf(oneOutlet(form))).toEqual(shapeOf(createCheckForm()))
        expect(Object.getPrototypeOf(form)).toBe(Object.prototype)
      }),
      { numRuns: 3000 },
    )
  })
})
