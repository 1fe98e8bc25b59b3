import { flushPromises } from '@vue/test-utils'
import { describe, expect, test } from 'vitest'
import type { Invitation, Person } from '#shared/contracts/people.ts'
import { findPeople, lastRolesOf } from '../../../src/views/people/describePeople.ts'
import PeopleView from '../../../src/views/people/PeopleView.vue'
import { fakeServer, makeSession, mountRoom, refuse } from './mountRoom.ts'

function makePerson(overrides: Partial<Person> = {}): Person {
  return {
    id: 'person-1',
    name: 'Pat',
    email: 'pat@example.test',
    roles: ['blaster'],
    state: 'active',
    lastSeenAt: null,
    joinedAt: '2026-05-01T10:00:00.000Z',
    version: 1,
    ...overrides,
  }
}

const admin = makePerson({ id: 'admin', name: 'Ida', email: 'ida@example.test', roles: ['owner', 'admin'] })
const jose = makePerson({ id: 'jose', name: 'José Núñez', email: 'jose@example.test' })
const idaSession = makeSession({
  account: { id: 'a', name: 'Ida', email: 'ida@example.test', language: 'en' },
  roles: ['owner', 'admin'],
})

describe('who cannot go', () => {
  test('is the last active owner or admin', () => {
    expect(lastRolesOf(admin, [admin, jose])).toEqual(['owner', 'admin'])
    const other = makePerson({ id: 'other', roles: ['admin'] })
    expect(lastRolesOf(admin, [admin, other])).toEqual(['owner'])
    expect(lastRolesOf(admin, [admin, { ...other, state: 'deactivated' }])).toEqual(['owner', 'admin'])
    expect(lastRolesOf({ ...admin, state: 'deactivated' }, [admin])).toEqual([])
    expect(lastRolesOf(jose, [jose])).toEqual([])
  })
})

describe('finding somebody', () => {
  const nameRoles = (roles: readonly string[]) => roles.join(' ')
  test('works by parts of name, address and role, without accents', () => {
    const find = (search: string) => findPeople([admin, jose], search, nameRoles).map(({ id }) => id)
    expect(find('jose nunez')).toEqual(['jose'])
    expect(find('IDA')).toEqual(['admin'])
    expect(find('blaster')).toEqual(['jose'])
    expect(find('example.test')).toEqual(['admin', 'jose'])
    expect(find('ida blaster')).toEqual([])
    expect(find('  ')).toEqual(['admin', 'jose'])
  })

  test('shows those who work here first', () => {
    const gone = makePerson({ id: 'gone', name: 'Abe', state: 'deactivated' })
    expect(findPeople([gone, jose], '', nameRoles).map(({ id }) => id)).toEqual(['jose', 'gone'])
  })
})

describe('the page of people', () => {
  async function openPage(answer: Parameters<typeof fakeServer>[0] = () => undefined) {
    let people = [admin, jose]
    const asked = fakeServer((request) => {
      if (request.method === 'GET') return { people, invitations: [] satisfies Invitation[] }
      return answer(request)
    })
    const room = await mountRoom(PeopleView, { session: idaSession })
    const press = async (name: string | RegExp) => {
      const found = room.wrapper
        .findAll('button')
        .find((each) => [each.text(), each.attributes('aria-label')].some((text) => text?.match(name)))
      if (!found) throw new Error(`No button says ${name}.`)
      await found.trigger('click')
      await flushPromises()
    }
    return { ...room, asked, press, setPeople: (next: Person[]) => (people = next) }
  }

  test('says why the last admin and owner cannot go', async () => {
    const page = await openPage()
    await page.press('Change Ida')
    expect(page.wrapper.text()).toContain('Ida is the only admin')
    expect(page.wrapper.text()).toContain('Ida is the only owner')
    expect(page.wrapper.text()).toContain('Cannot be deactivated')
    const boxes = page.wrapper.findAll<HTMLInputElement>('input[type=checkbox]')
    expect(boxes.map(({ element }) => element.disabled)).toEqual([false, false, true, true])
  })

  test('deactivates only after a word of what happens', async () => {
    const page = await openPage(() => ({ ...jose, state: 'deactivated', version: 2 }))
    await page.press('Change José')
    await page.press('Deactivate …')
    expect(page.wrapper.text()).toContain('signed out everywhere at once')
    expect(page.asked.filter(({ method }) => method === 'PUT')).toEqual([])
    page.setPeople([admin, { ...jose, state: 'deactivated', version: 2 }])
    await page.press('Deactivate José')
    expect(page.asked.find(({ method }) => method === 'PUT')).toEqual({
      method: 'PUT',
      path: '/api/v1/people/jose',
      body: { version: 1, state: 'deactivated' },
    })
    expect(page.wrapper.text()).toContain('deactivated')
  })

  test('a change that the server refuses is said where it was made', async () => {
    const page = await openPage(() => refuse(409, 'last-admin'))
    await page.press('Change José')
    await page.wrapper.get('form').trigger('submit')
    await flushPromises()
    expect(page.wrapper.get('form [role=alert]').text()).toContain('The last admin cannot go')
  })

  test('the same invitation sent twice is one, a corrected one is another', async () => {
    let tries = 0
    const page = await openPage(() => (++tries < 3 ? new TypeError('offline') : {}))
    await page.press('Invite somebody')
    const form = page.wrapper.get('.invite form')
    const send = async (email: string) => {
      await form.get('input[type=email]').setValue(email)
      await form.trigger('submit')
      await flushPromises()
    }
    await send('new@example.test')
    await send('new@example.test')
    await send('newer@example.test')
    const ids = page.asked
      .filter(({ method }) => method === 'POST')
      .map(({ body }) => (body as { id: string }).id)
    expect(ids).toHaveLength(3)
    expect(ids[1]).toBe(ids[0])
    expect(ids[2]).not.toBe(ids[0])
    expect(page.wrapper.text()).toContain('Invitation sent to newer@example.test')
  })
})
