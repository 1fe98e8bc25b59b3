import { onBeforeUnmount, onMounted, ref } from 'vue'

const tokens = ['ground', 'ink', 'muted', 'line', 'steel', 'holds', 'barely', 'short'] as const
export type TokenColours = Record<(typeof tokens)[number], string> & { font: string }

function readTokens(): TokenColours {
  const style = getComputedStyle(document.documentElement)
  const read = (name: string) => style.getPropertyValue(`--${name}`).trim()
  const colours = Object.fromEntries(tokens.map((name) => [name, read(name)]))
  return { ...colours, font: read('font') } as TokenColours
}

/** The theme's colours as text, for a canvas, which cannot read them from the style sheet. */
export function useTokenColours() {
  const colours = ref(readTokens())
  let isShown = true
  const observer = new MutationObserver(() => {
    colours.value = readTokens()
  })
  onMounted(() => {
    // A canvas drawn before Inter has arrived keeps the fallback until it is drawn again.
    if (document.fonts?.status === 'loading') {
      void document.fonts.ready.then(() => {
        if (isShown) colours.value = readTokens()
      })
    }
    observer.observe(document.documentElement, { attributes: true, attributeFilter: ['data-theme'] })
  })
  onBeforeUnmount(() => {
    isShown = false
    observer.disconnect()
  })
  return colours
}
