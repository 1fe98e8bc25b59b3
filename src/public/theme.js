// Runs before the first paint: the theme and language of this device, and whether the page drawn at build is the one
// this visit will show. Where it is not, it stays hidden until the application has drawn its own.
;(function () {
  var root = document.documentElement
  var stored
  try {
    stored = JSON.parse(localStorage.getItem('sixteenth.preferences') || '{}') || {}
  } catch {
    stored = {}
  }
  var dark = matchMedia('(prefers-color-scheme: dark)').matches
  var theme = ['light', 'dark', 'sun'].indexOf(stored.theme) >= 0 ? stored.theme : dark ? 'dark' : 'light'
  var spoken = /^es/.test(navigator.language) ? 'es' : 'en'
  var language = ['en', 'es'].indexOf(stored.language) >= 0 ? stored.language : spoken
  root.dataset.theme = theme
  root.lang = language
  var isDrawn = language === 'en' && stored.units !== 'metric' && !location.hash && location.pathname === '/'
  if (!isDrawn) root.classList.add('is-starting')
})()
