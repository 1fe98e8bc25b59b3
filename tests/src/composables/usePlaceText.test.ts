import { beforeEach, expect, test } from 'vitest'
import { usePlaceText } from '../../../src/composables/usePlaceText.ts'

beforeEach(() => history.replaceState(null, ''))

test('what was searched for is there again where the back key leads to the same place', () => {
  usePlaceText<string>('search', '').value = 'old 425'
  expect(usePlaceText('search', '').value).toBe('old 425')
  history.pushState({}, '', '/elsewhere')
  expect(usePlaceText('search', '').value).toBe('')
})

test('what the router keeps of a place stays beside it', () => {
  history.replaceState({ back: '/rigs', position: 3 }, '')
  usePlaceText<string>('order', 'worst').value = 'name'
  expect(history.state).toEqual({ back: '/rigs', position: 3, order: 'name' })
})
