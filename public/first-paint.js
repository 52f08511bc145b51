// Sets the chosen theme before the first paint, so that a dark sheet never flashes light.
(function () {
  var theme = 'system';
  try {
    theme = JSON.parse(localStorage.getItem('sidewash.device') || '{}').theme || 'system';
  } catch (refused) {
    theme = 'system';
  }
  var dark = theme === 'dark' || (theme === 'system' && matchMedia('(prefers-color-scheme: dark)').matches);
  document.documentElement.dataset.theme = dark ? 'dark' : 'light';
})();
