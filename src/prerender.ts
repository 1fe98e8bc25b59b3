import { createMemoryHistory } from 'vue-router'
import { renderToString } from 'vue/server-renderer'
import { createSixteenth } from './createSixteenth.ts'

/** The page of the check that a visitor finds, as the browser will draw it. */
export async function prerender(): Promise<string> {
  const { app, router } = createSixteenth(createMemoryHistory())
  await router.push('/')
  await router.isReady()
  const page = await renderToString(app)
  // The application draws over the page: the marks by which it could take it over are of no use.
  return page.replace(/<!--[\][]?-->/g, '')
}
