import { Window } from 'happy-dom'
import { describe, expect, it } from 'vitest'
import { mails } from '../../../server/email/mails.ts'

const hostile = '<img src="https://elsewhere.test/x.png" onerror="alert(1)"> & \'Co\''
const origin = 'https://sixteenth.test'

const values = {
  name: hostile,
  companyName: hostile,
  invitedBy: hostile,
  link: `${origin}/somewhere#token-1`,
  signInLink: `${origin}/sign-in?a=1&b=2`,
  signUpLink: `${origin}/sign-up`,
  forgottenLink: `${origin}/forgotten-password`,
  expiresAt: '2026-05-10T15:00:00.000Z',
}

const linksOf = {
  confirmSignUp: [values.link],
  alreadyHasAccount: [values.signInLink, values.forgottenLink],
  resetPassword: [values.link],
  noAccount: [values.signUpLink],
  passwordChanged: [values.forgottenLink],
  invitation: [values.link],
} satisfies Record<keyof typeof mails, string[]>

const kinds = Object.keys(linksOf) as (keyof typeof mails)[]
const languages = ['en', 'es'] as const
const cases = kinds.flatMap((kind) => languages.map((language) => ({ kind, language })))

function write(kind: keyof typeof mails, language: 'en' | 'es') {
  return mails[kind]('somebody@example.test', language, values)
}

function parse(html: string) {
  const { document } = new Window({ settings: { disableJavaScriptEvaluation: true } })
  document.write(html)
  return document
}

describe.each(cases)('the mail $kind in $language', ({ kind, language }) => {
  it('carries its links in both of its forms', () => {
    const { to, text, html } = write(kind, language)
    expect(to).toBe('somebody@example.test')
    const document = parse(html)
    for (const link of linksOf[kind]) {
      expect(text).toContain(link)
      expect(document.body.textContent).toContain(link)
    }
    const targets = [...document.querySelectorAll('a')].map((anchor) => anchor.getAttribute('href'))
    expect(targets).not.toHaveLength(0)
    for (const target of targets) expect(target).toBe(linksOf[kind][0])
  })

  it('shows names as they are typed, and fetches and runs nothing', () => {
    const { html, text } = write(kind, language)
    const document = parse(html)
    const fetching = 'img, script, link, iframe, object, style, [src], [background], [onerror]'
    expect(document.querySelectorAll(fetching)).toHaveLength(0)
    expect(html).not.toMatch(/url\(|@import/)
    if (text.includes(hostile)) expect(document.body.textContent).toContain(hostile)
    expect(document.documentElement.getAttribute('lang')).toBe(language)
  })
})

describe.each(kinds)('the mail %s', (kind) => {
  it('says in Spanish what it says in English, in words of its own', () => {
    const [english, spanish] = languages.map((language) => write(kind, language))
    expect(spanish?.subject).not.toBe(english?.subject)
    const linesOf = (text = '') => text.split('\n').filter((line) => line !== '' && !line.startsWith('http'))
    const shared = linesOf(english?.text).filter((line) => linesOf(spanish?.text).includes(line))
    expect(shared).toEqual(['-- ', 'Sixteenth'])
  })
})
