// A browser by the name its user knows, out of what it says of itself.

const BROWSERS: [RegExp, string][] = [
  [/\bEdg\//, 'Edge'],
  [/\bFirefox\//, 'Firefox'],
  [/Chrom(e|ium)\//, 'Chrome or Chromium'],
  [/\bVersion\/.*\bSafari\//, 'Safari'],
]
const SYSTEMS: [RegExp, string][] = [
  [/Windows/, 'Windows'],
  [/iPhone|iPad/, 'iOS'],
  [/Macintosh/, 'macOS'],
  [/Android/, 'Android'],
  [/Linux/, 'Linux'],
]

export function browserOf(userAgent: string): string {
  const of = (list: [RegExp, string][]) => list.find(([sign]) => sign.test(userAgent))?.[1]
  const browser = of(BROWSERS) ?? 'An unknown browser'
  const system = of(SYSTEMS)
  return system ? `${browser} on ${system}` : browser
}
