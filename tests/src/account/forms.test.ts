import { flushPromises } from '@vue/test-utils'
import { describe, expect, test } from 'vitest'
import { heldToken } from '../../../src/router/heldToken.ts'
import { usePreferencesStore } from '../../../src/stores/preferences.ts'
import CompanyForm from '../../../src/components/account/CompanyForm.vue'
import PasswordForm from '../../../src/components/account/PasswordForm.vue'
import ResetPasswordView from '../../../src/views/account/ResetPasswordView.vue'
import SignInView from '../../../src/views/account/SignInView.vue'
import SignUpView from '../../../src/views/account/SignUpView.vue'
import { company, fakeServer, makeSession, mountRoom, refuse } from './mountRoom.ts'

describe('signing up', () => {
  test('each refused field says so in the person’s language, and everything typed stays', async () => {
    fakeServer(() =>
      refuse(422, 'invalid-fields', [
        { path: '/email', code: 'not-an-email', message: 'x' },
        { path: '/password', code: 'too-common', message: 'x' },
        { path: '/company/name', code: 'required', message: 'x' },
      ]),
    )
    const room = await mountRoom(SignUpView, { language: 'es' })
    await room.fieldOf('Su nombre').setValue('Ana')
    await room.fieldOf('Correo').setValue('ana en casa')
    await room.fieldOf('Contraseña').setValue('password123')
    await room.submit()
    expect(room.sentenceOf('Correo')).toBe('Todavía no es una dirección de correo.')
    expect(room.sentenceOf('Contraseña')).toContain('de las primeras que se adivinan')
    expect(room.sentenceOf('Empresa')).toBe('Falta este dato.')
    expect(room.sentenceOf('Su nombre')).toBe('')
    expect(room.fieldOf('Correo').element.value).toBe('ana en casa')
    expect(room.fieldOf('Contraseña').element.value).toBe('password123')
    expect(document.activeElement).toBe(room.fieldOf('Correo').element)

    await room.fieldOf('Correo').setValue('ana@example.test')
    expect(room.sentenceOf('Correo')).toBe('')
    expect(room.sentenceOf('Empresa')).toBe('Falta este dato.')
  })

  test('without a signal nothing is lost, and the next try goes through', async () => {
    let isOffline = true
    const asked = fakeServer(() => (isOffline ? new TypeError('offline') : undefined))
    const room = await mountRoom(SignUpView)
    await room.fieldOf('Your name').setValue('Ana')
    await room.fieldOf('E-mail').setValue('ana@example.test')
    await room.submit()
    expect(room.wrapper.get('[role=alert]').text()).toContain('Nothing you typed is lost')
    expect(room.fieldOf('Your name').element.value).toBe('Ana')
    isOffline = false
    await room.submit()
    expect(room.wrapper.text()).toContain('We wrote to ana@example.test')
    expect(asked.at(-1)).toMatchObject({ method: 'POST', path: '/api/v1/sign-up', body: { name: 'Ana' } })
  })

  test('a second tap while the first is under way sends nothing', async () => {
    let answer: (response: Response) => void = () => {}
    const waiting = new Promise<Response>((resolve) => (answer = resolve))
    const asked = fakeServer(() => waiting)
    const room = await mountRoom(SignUpView)
    await room.submit()
    await room.submit()
    expect(asked).toHaveLength(1)
    answer(new Response(''))
    await flushPromises()
  })

  test('a password manager is told what is a new password, and it can be shown', async () => {
    const room = await mountRoom(SignUpView)
    const password = room.fieldOf('Password')
    expect(password.attributes()).toMatchObject({ type: 'password', autocomplete: 'new-password' })
    expect(room.fieldOf('E-mail').attributes()).toMatchObject({ type: 'email', autocomplete: 'username' })
    await room.wrapper.get('button[aria-pressed]').trigger('click')
    expect(room.fieldOf('Password').attributes('type')).toBe('text')
  })
})

describe('signing in', () => {
  test('leads to the page that was asked for, in the language of the account', async () => {
    fakeServer(() => makeSession({ account: { ...makeSession().account, language: 'es' } }))
    const room = await mountRoom(SignInView)
    await room.router.push('/sign-in?next=/people')
    await room.submit()
    expect(room.router.currentRoute.value.fullPath).toBe('/people')
    expect(room.store.session?.account.name).toBe('Pat')
    expect(usePreferencesStore().language).toBe('es')
  })

  test.each([
    '//evil.example',
    '/\\evil.example',
    'https://evil.example',
    'javascript:alert(1)',
    '/%2e//evil',
  ])('never leads elsewhere: %s', async (next) => {
    fakeServer(() => makeSession())
    const room = await mountRoom(SignInView)
    await room.router.push({ path: '/sign-in', query: { next } })
    await room.submit()
    expect(room.router.currentRoute.value.fullPath).toBe('/')
  })

  test('a wrong password is blamed on neither of the two, and both stay', async () => {
    fakeServer(() => refuse(401, 'wrong-credentials'))
    const room = await mountRoom(SignInView)
    await room.fieldOf('E-mail').setValue('pat@example.test')
    await room.fieldOf('Password').setValue('wrong horse')
    await room.submit()
    expect(room.wrapper.get('[role=alert]').text()).toBe('E-mail and password do not go together.')
    expect(room.fieldOf('Password').element.value).toBe('wrong horse')
    expect(room.fieldOf('Password').attributes('autocomplete')).toBe('current-password')
  })

  test('demo people are one tap, and only where the server has some', async () => {
    const asked = fakeServer(() => makeSession())
    const room = await mountRoom(SignInView)
    expect(room.wrapper.text()).not.toContain('demo')
    room.store.visit = {
      session: null,
      demoPeople: [{ email: 'lu@demo.example', name: 'Lu', roles: ['blaster'] }],
      hasMailPage: true,
    }
    await flushPromises()
    await room.wrapper
      .findAll('button')
      .find((each) => each.text().startsWith('Lu'))!
      .trigger('click')
    await flushPromises()
    expect(asked.at(-1)).toMatchObject({ path: '/api/v1/demo-session', body: { email: 'lu@demo.example' } })
    expect(room.store.session).not.toBeNull()
  })
})

describe('the other forms', () => {
  test('a link that was used says what to do next', async () => {
    fakeServer(() => refuse(410, 'link-not-good'))
    heldToken.value = 'used'
    const room = await mountRoom(ResetPasswordView)
    await room.fieldOf('New password').setValue('blast hose whip check')
    await room.submit()
    expect(room.wrapper.text()).toContain('This link no longer works')
    expect(room.wrapper.get('a').attributes('href')).toBe('/forgotten-password')
    heldToken.value = null
  })

  test('a refused new password does not use the link up', async () => {
    let isRefused = true
    const asked = fakeServer(() =>
      isRefused
        ? refuse(422, 'invalid-fields', [{ path: '/password', code: 'too-short', message: 'x' }])
        : { email: 'pat@example.test' },
    )
    heldToken.value = 'good'
    const room = await mountRoom(ResetPasswordView)
    await room.fieldOf('New password').setValue('short')
    await room.submit()
    expect(room.sentenceOf('New password')).toBe('At least 10 characters.')
    isRefused = false
    await room.fieldOf('New password').setValue('blast hose whip check')
    await room.submit()
    expect(asked.at(-1)?.body).toEqual({ token: 'good', password: 'blast hose whip check' })
    expect(heldToken.value).toBeNull()
    expect(room.fieldOf('E-mail').element.value).toBe('pat@example.test')
  })

  test('a wrong password now is said at its field', async () => {
    fakeServer(() =>
      refuse(422, 'invalid-fields', [{ path: '/currentPassword', code: 'wrong-password', message: 'x' }]),
    )
    const room = await mountRoom(PasswordForm, {
      props: { email: 'pat@example.test' },
      session: makeSession(),
    })
    await room.fieldOf('Password now').setValue('no')
    await room.submit()
    expect(room.sentenceOf('Password now')).toBe('This is not your password.')
  })

  test('company settings that somebody else saved are shown before they are written over', async () => {
    const theirs = { ...company, version: 2, name: 'Theirs' }
    const asked = fakeServer(({ method, body }) => {
      if (method !== 'PUT') return { session: makeSession(), demoPeople: [], hasMailPage: false }
      const { version } = body as { version: number }
      return version === 2
        ? { ...(body as object), id: company.id, version: 3 }
        : refuse(409, 'version-conflict', undefined, { stored: theirs })
    })
    const room = await mountRoom(CompanyForm, { props: { company }, session: makeSession() })
    await room.fieldOf('Company').setValue('Mine')
    await room.submit()
    expect(room.wrapper.get('[role=alert]').text()).toContain('Theirs')
    expect(room.fieldOf('Company').element.value).toBe('Mine')
    await room.submit()
    expect(asked.filter(({ method }) => method === 'PUT').map(({ body }) => body)).toMatchObject([
      { name: 'Mine', version: 1 },
      { name: 'Mine', version: 2 },
    ])
    expect(room.wrapper.text()).toContain('Saved')
  })
})
