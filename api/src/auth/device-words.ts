const BROWSERS: readonly (readonly [RegExp, string])[] = [
  [/\bEdgA?\/|\bEdgiOS\//, 'Edge'],
  [/\bOPR\//, 'Opera'],
  [/\bSamsungBrowser\//, 'Samsung Internet'],
  [/\b(Firefox|FxiOS)\//, 'Firefox'],
  [/\b(Chrome|Chromium|HeadlessChrome|CriOS)\//, 'Chrome'],
  [/\bVersion\/.*\bSafari\//, 'Safari'],
];
const DEVICES: readonly (readonly [RegExp, string])[] = [
  [/\biPhone\b/, 'an iPhone'],
  [/\biPad\b/, 'an iPad'],
  [/\bAndroid\b.*\bMobile\b/, 'an Android phone'],
  [/\bAndroid\b/, 'an Android tablet'],
  [/\bWindows\b/, 'Windows'],
  [/\bCrOS\b/, 'a Chromebook'],
  [/\bMacintosh\b/, 'a Mac'],
  [/\bLinux\b/, 'Linux'],
];

const first = (table: readonly (readonly [RegExp, string])[], text: string): string | undefined => table.find(([pattern]) => pattern.test(text))?.[1];

/** What a browser says about itself, as people would say it: "Firefox on Windows". */
export function deviceWords(userAgent: string): string {
  const browser = first(BROWSERS, userAgent);
  const device = first(DEVICES, userAgent);
  if (browser && device) return `${browser} on ${device}`;
  return browser ?? (device ? `A browser on ${device}` : 'An unknown browser');
}
