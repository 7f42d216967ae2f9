import { execFileSync } from 'node:child_process'

/** Builds the program once before the tests, some of which start it as its users do. */
export function setup(): void {
  execFileSync('npm', ['run', '--silent', 'build'], {
    cwd: new URL('..', import.meta.url),
    stdio: 'inherit',
  })
}
