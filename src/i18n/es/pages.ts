export const pages = {
  settings: {
    title: 'Settings',
    remembered: 'Remembered on this device.',
    units: 'Units',
    unitNames: { us: 'US: psi, cfm, inches', metric: 'Metric: bar, m³/min, mm' },
    language: 'Language',
    languageNames: { en: 'English', es: 'Español' },
    theme: 'Theme',
    themeNames: { light: 'Light', dark: 'Dark', sun: 'Sun' },
    themeHints: { sun: 'The most contrast, for glare.' },
  },
  sources: {
    title: 'Where the figures come from',
  },
  notFound: { title: 'Nothing here', text: 'This page does not exist.', back: 'To the pressure check' },
}
