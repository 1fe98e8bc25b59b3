import { onBeforeUnmount, onMounted, ref, watch } from 'vue'
import type { Ref } from 'vue'

const tokens = ['ground', 'ink', 'muted', 'line', 'steel', 'holds', 'barely', 'short'] as const
export type TokenColours = Record<(typeof tokens)[number], string> & { font: string }

function readTokens(element: Element): TokenColours {
  const style = getComputedStyle(element)
  const read = (name: string) => style.getPropertyValue(`--${name}`).trim()
  const colours = Object.fromEntries(tokens.map((name) => [name, read(name)]))
  return { ...colours, font: read('font') } as TokenColours
}

/**
 * The colours as they are at an element, as text for a canvas, which cannot read them from the style sheet.
 *
 * Inputs   the element, under whatever greys it · what changes when that does
 */
export function useTokenColours(element: Readonly<Ref<Element | null>>, trigger: () => unknown) {
  const readHere = () => readTokens(element.value ?? document.documentElement)
  const colours = ref(readHere())
  let isShown = true
  const refresh = () => {
    if (isShown) colours.value = readHere()
  }
  const refreshIfChanged = () => {
    if (JSON.stringify(readHere()) !== JSON.stringify(colours.value)) refresh()
  }
  const observer = new MutationObserver(refresh)
  onMounted(() => {
    refreshIfChanged()
    // A canvas drawn before Inter has arrived keeps the fallback until it is drawn again.
    if (document.fonts?.status === 'loading') void document.fonts.ready.then(refresh)
    observer.observe(document.documentElement, { attributes: true, attributeFilter: ['data-theme'] })
  })
  watch(trigger, refreshIfChanged, { flush: 'post' })
  onBeforeUnmount(() => {
    isShown = false
    observer.disconnect()
  })
  return colours
}
