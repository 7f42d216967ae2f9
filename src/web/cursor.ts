import { signal } from '@preact/signals'

/** The moment that the pictures point at, s after release; null while nobody points. */
export const cursorElapsed = signal<number | null>(null)
