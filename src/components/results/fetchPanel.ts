import { defineAsyncComponent } from 'vue'
import type { Component } from 'vue'
import PanelFailed from './PanelFailed.vue'
import PanelLoading from './PanelLoading.vue'

/** A panel whose script is fetched when it is first drawn; what cannot be fetched says so and may be tried again. */
export function fetchPanel<T extends Component>(load: () => Promise<{ default: T }>) {
  return defineAsyncComponent({
    loader: load,
    delay: 300,
    loadingComponent: PanelLoading,
    errorComponent: PanelFailed,
  })
}
