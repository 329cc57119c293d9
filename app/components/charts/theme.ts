// The design tokens as colours that a drawing library can read, kept up with the theme.
import { useEffect, useState } from 'react'
import type { ChartTheme } from './scatter.ts'

/** A token's value in the current theme: custom properties keep `light-dark()`, a used colour does not. */
function readTheme(): ChartTheme {
  const probe = document.createElement('span')
  probe.hidden = true
  document.body.append(probe)
  const colour = (token: string) => {
    probe.style.color = `var(--${token})`
    return getComputedStyle(probe).color
  }
  const theme: ChartTheme = {
    sheet: colour('sheet'),
    ink: colour('ink'),
    soft: colour('soft'),
    line: colour('line'),
    copper: colour('copper'),
    copperInk: colour('copper-ink'),
    copperWash: colour('copper-wash'),
    verdigris: colour('verdigris'),
    categories: Array.from({ length: 6 }, (_, i) => colour(`category-${i}`)),
    tones: Array.from({ length: 24 }, (_, i) => colour(`tone-${i}`)),
    font: getComputedStyle(document.body).fontFamily,
  }
  probe.remove()
  return theme
}

/** Null on the server and until the page is live. */
export function useChartTheme(): ChartTheme | null {
  const [theme, setTheme] = useState<ChartTheme | null>(null)
  useEffect(() => {
    const update = () => setTheme(readTheme())
    update()
    const dark = matchMedia('(prefers-color-scheme: dark)')
    dark.addEventListener('change', update)
    const pinned = new MutationObserver(update)
    pinned.observe(document.documentElement, { attributeFilter: ['data-theme', 'class', 'style'] })
    // Printing is on white: the tokens change with the medium.
    const print = matchMedia('print')
    print.addEventListener('change', update)
    return () => {
      dark.removeEventListener('change', update)
      print.removeEventListener('change', update)
      pinned.disconnect()
    }
  }, [])
  return theme
}
