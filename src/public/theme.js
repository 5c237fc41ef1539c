// The reader's own choice of theme, set before anything is painted. Key and values: src/lib/theme.ts.
try {
  var theme = localStorage.getItem('pullcord.theme')
  if (theme === 'light' || theme === 'dark' || theme === 'strong') document.documentElement.dataset.theme = theme
} catch (blocked) {
  // A browser that keeps nothing follows the system.
}
