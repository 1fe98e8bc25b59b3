import { describe, expect, test } from 'vitest'
import { createMemoryHistory } from 'vue-router'
import { isWithin, navigationPages } from '../../../src/components/layout/navigationPages.ts'
import { createPages } from '../../../src/router/index.ts'

describe('the navigation', () => {
  test('leads only to pages that exist', () => {
    const router = createPages(createMemoryHistory(), async () => {})
    const lost = navigationPages.filter(({ path }) => router.resolve(path).name === 'not-found')
    expect(lost).toEqual([])
  })

  test('shows where one is, on a page under another too', () => {
    const shownAt = (address: string) =>
      navigationPages.filter((page) => isWithin(page, address)).map(({ name }) => name)
    expect(shownAt('/')).toEqual(['check'])
    expect(shownAt('/rigs/3f2a/edit')).toEqual(['rigs'])
    expect(shownAt('/fleet/sites')).toEqual(['rigs'])
    expect(shownAt('/people')).toEqual(['people', 'more'])
    expect(shownAt('/rigsomething')).toEqual([])
  })

  test('a phone’s bar holds five at most, for a visitor and for whoever has every role', () => {
    const onPhone = (isVisitor: boolean) =>
      navigationPages.filter(
        ({ isOn, isFor }) => isOn !== 'desk' && (!isFor || (isFor === 'visitor') === isVisitor),
      )
    expect(onPhone(true)).toHaveLength(5)
    expect(onPhone(false)).toHaveLength(5)
  })
})
