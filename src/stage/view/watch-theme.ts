/** Calls back when the page's theme attribute or the wish for more contrast changes; returns what ends it. */
export function watchTheme(changed: () => void): () => void {
  const observer = new MutationObserver(changed);
  observer.observe(document.documentElement, { attributes: true, attributeFilter: ['data-theme', 'class'] });
  const contrast = window.matchMedia('(prefers-contrast: more)');
  contrast.addEventListener('change', changed);
  return () => {
    observer.disconnect();
    contrast.removeEventListener('change', changed);
  };
}
