import { signal } from '@preact/signals'

const dark = matchMedia('(prefers-color-scheme: dark)')

/** Counts changes of the colour scheme; who draws on a canvas reads it to be drawn again. */
export const scheme = signal(0)
dark.addEventListener('change', () => {
  inks.clear()
  scheme.value += 1
})

/** Colours asked for in this scheme: to ask the browser costs a pass over the page's styles. */
const inks = new Map<string, string>()

/** The colour of a token (`--ascent`) as it is now within an element, for canvases that know no CSS. */
export function ink(token: string, within: Element = document.body): string {
  let colour = inks.get(token)
  if (colour === undefined) {
    const probe = document.createElement('span')
    probe.style.color = `var(${token})`
    within.append(probe)
    colour = getComputedStyle(probe).color
    probe.remove()
    inks.set(token, colour)
  }
  return colour
}

/** Tokens of the runs after the first, which has `--ascent` and `--descent`. */
const OTHERS = ['--run-2', '--run-3', '--run-4', '--run-5'] as const

/** The token that draws a run's ascent or descent; the number of a run tells it apart too. */
export function runToken(index: number, phase: 'ascent' | 'descent'): string {
  return index === 0 ? `--${phase}` : OTHERS[(index - 1) % OTHERS.length]
}
