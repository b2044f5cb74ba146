/* global document */
// Before the first paint: a theme chosen by hand, so that a page never flashes in the other one.
// A file of its own because the content-security policy allows no inline script.
try {
  const chosen = localStorage.getItem('duntless.theme')
  if (chosen === 'light' || chosen === 'dark') document.documentElement.dataset.theme = chosen
} catch {
  // Storage may be forbidden; then the system's theme it is.
}
