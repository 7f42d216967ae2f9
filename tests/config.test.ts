import { expect, test } from 'vitest'
import { readConfig } from '../src/config.ts'

test('nothing set is the documented default', () => {
  expect(readConfig({})).toEqual({
    host: '127.0.0.1',
    port: 8080,
    databaseFile: 'driftbook.sqlite',
    logLevel: 'info',
    demo: true,
    webhooks: 'off',
  })
})

test('every variable is read', () => {
  const environment = {
    HOST: '0.0.0.0',
    PORT: '9000',
    DATABASE_FILE: '/data/a.sqlite',
    LOG_LEVEL: 'warn',
    DEMO: 'off',
    WEBHOOKS: 'public',
  }
  expect(readConfig(environment)).toEqual({
    host: '0.0.0.0',
    port: 9000,
    databaseFile: '/data/a.sqlite',
    logLevel: 'warn',
    demo: false,
    webhooks: 'public',
  })
})

test.each([
  ['PORT', 'http'],
  ['PORT', ''],
  ['PORT', '65536'],
  ['PORT', '-1'],
  ['LOG_LEVEL', 'loud'],
  ['DEMO', 'false'],
  ['WEBHOOKS', 'yes'],
  ['HOST', ''],
  ['DATABASE_FILE', ''],
])('%s=%s is refused by name', (name, value) => {
  expect(() => readConfig({ [name]: value })).toThrow(name)
})
