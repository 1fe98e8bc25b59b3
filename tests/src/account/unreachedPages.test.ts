import { describe, expect, test } from 'vitest'
import { createMemoryHistory, createRouter } from 'vue-router'
import { mindUnreachedPages, unreachedPage } from '../../../src/router/unreachedPages.ts'

const page = { render: () => null }

/** A router whose second page is fetched only while there is a signal. */
function makeRouter(signal: { isThere: boolean }, isServerThere: boolean) {
  const opened: string[] = []
  const router = createRouter({
    history: createMemoryHistory(),
    routes: [
      { path: '/', component: page },
      {
        path: '/rigs',
        component: () => (signal.isThere ? Promise.resolve(page) : Promise.reject(new TypeError('fetch'))),
      },
    ],
  })
  mindUnreachedPages(
    router,
    async () => isServerThere,
    (path) => opened.push(path),
  )
  return { router, opened }
}

const settle = () => new Promise((resolve) => setTimeout(resolve))

describe('a page whose script does not come', () => {
  test('is named without a signal, and no more once it has come', async () => {
    const signal = { isThere: false }
    const { router, opened } = makeRouter(signal, false)
    await router.push('/')
    await router.push('/rigs?from=check').catch(() => {})
    await settle()
    expect(unreachedPage.value).toBe('/rigs?from=check')
    expect(router.currentRoute.value.path).toBe('/')
    signal.isThere = true
    await router.push(unreachedPage.value!)
    expect(router.currentRoute.value.path).toBe('/rigs')
    expect(unreachedPage.value).toBeNull()
    expect(opened).toEqual([])
  })

  test('is opened whole where the server answers, since its files have other names by now', async () => {
    const { router, opened } = makeRouter({ isThere: false }, true)
    await router.push('/')
    await router.push('/rigs').catch(() => {})
    await settle()
    expect(opened).toEqual(['/rigs'])
    expect(unreachedPage.value).toBeNull()
  })

  test('is not opened over and over where it is the first one', async () => {
    const { router, opened } = makeRouter({ isThere: false }, true)
    await router.push('/rigs').catch(() => {})
    await settle()
    expect(opened).toEqual([])
  })
})
