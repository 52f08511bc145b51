/** First match wins: browsers also name the ones they descend from. */
const BROWSERS: readonly [RegExp, string][] = [
  [/\bEdg(?:e|A|iOS)?\//, 'Edge'],
  [/\bOPR\//, 'Opera'],
  [/\bSamsungBrowser\//, 'Samsung Internet'],
  [/\b(?:Firefox|FxiOS)\//, 'Firefox'],
  [/\b(?:Chrome|CriOS|Chromium|HeadlessChrome)\//, 'Chrome'],
  [/\bSafari\//, 'Safari'],
];
const SYSTEMS: readonly [RegExp, string][] = [
  [/\biPhone\b/, 'iPhone'],
  [/\biPad\b/, 'iPad'],
  [/\bAndroid\b/, 'Android'],
  [/\bWindows\b/, 'Windows'],
  [/\bCrOS\b/, 'ChromeOS'],
  [/\bMac OS X\b|\bMacintosh\b/, 'macOS'],
  [/\bLinux\b|\bX11\b/, 'Linux'],
];

/** "Firefox on Windows": what a browser says of itself, in words. */
export function deviceWords(agent: string | null): string {
  if (agent === null || agent.trim() === '') return 'Unknown device';
  const find = (list: typeof BROWSERS): string | undefined => list.find(([pattern]) => pattern.test(agent))?.[1];
  const system = find(SYSTEMS);
  const browser = find(BROWSERS) ?? (system === undefined ? 'A program' : 'A browser');
  return system === undefined ? browser : `${browser} on ${system}`;
}
