import type { App } from 'vue'
import type { Translations } from '../i18n/index.ts'
import { loadRoomWords } from '../i18n/index.ts'

/** What the pages behind the sign-in need and the check does not; fetched once, with the first of them. */
export function createRoomKeeper(app: App, translations: Translations): () => Promise<void> {
  let preparing: Promise<void> | null = null

  async function prepare() {
    const [{ PiniaColada }] = await Promise.all([import('@pinia/colada'), loadRoomWords(translations)])
    app.use(PiniaColada, { queryOptions: { staleTime: 15_000, gcTime: 300_000 } })
  }

  return () =>
    (preparing ??= prepare().catch((error: unknown) => {
      // fetched again with the next page
      preparing = null
      throw error
    }))
}
