import { definePreset } from '@primeuix/themes'
import base from '@primeuix/themes/aura/base'
import button from '@primeuix/themes/aura/button'
import inputtext from '@primeuix/themes/aura/inputtext'

/** PrimeVue in the application's own colours: every token points at a variable of assets/tokens.css. */
export const preset = definePreset(
  { ...base, components: { button, inputtext } },
  {
    semantic: {
      focusRing: { width: '3px', style: 'solid', color: 'var(--link)', offset: '2px', shadow: 'none' },
      formField: { borderRadius: 'var(--radius-small)', focusRing: { width: '0' } },
      primary: { color: 'var(--ink)', contrastColor: 'var(--ground)' },
      text: { color: 'var(--ink)', mutedColor: 'var(--muted)' },
      content: { background: 'var(--card)', borderColor: 'var(--line)', color: 'var(--ink)' },
    },
    components: {
      inputtext: {
        root: {
          background: 'transparent',
          color: 'var(--ink)',
          borderColor: 'transparent',
          hoverBorderColor: 'transparent',
          focusBorderColor: 'transparent',
          invalidBorderColor: 'transparent',
          placeholderColor: 'var(--muted)',
          invalidPlaceholderColor: 'var(--muted)',
          shadow: 'none',
          paddingX: '0',
          paddingY: '6px',
          borderRadius: '0',
        },
      },
      button: {
        root: {
          borderRadius: 'var(--radius-small)',
          paddingX: '14px',
          paddingY: '12px',
          label: { fontWeight: '600' },
        },
        colorScheme: {
          light: {
            root: {
              primary: {
                background: 'var(--ink)',
                hoverBackground: 'var(--ink)',
                activeBackground: 'var(--ink)',
                borderColor: 'var(--ink)',
                hoverBorderColor: 'var(--ink)',
                activeBorderColor: 'var(--ink)',
                color: 'var(--ground)',
                hoverColor: 'var(--ground)',
                activeColor: 'var(--ground)',
              },
              secondary: {
                background: 'transparent',
                hoverBackground: 'var(--card)',
                activeBackground: 'var(--card)',
                borderColor: 'var(--steel)',
                hoverBorderColor: 'var(--ink)',
                activeBorderColor: 'var(--ink)',
                color: 'var(--ink)',
                hoverColor: 'var(--ink)',
                activeColor: 'var(--ink)',
              },
            },
          },
        },
      },
    },
  },
)
