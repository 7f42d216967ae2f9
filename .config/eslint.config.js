import js from '@eslint/js'
import tseslint from 'typescript-eslint'

/** The rooms of src/, ground floor first: a room imports only from itself and from rooms before it. */
const rooms = [
  'physics',
  'soundings',
  'fields',
  'planning',
  'exchange',
  'store',
  'fetching',
  'service',
]

const roomRules = rooms.map((room, floor) => ({
  files: [`src/${room}/**/*.ts`],
  rules: {
    'no-restricted-imports': [
      'error',
      {
        patterns: [
          {
            regex: `^(\\.\\./)+(${[...rooms.slice(floor + 1), 'web', 'main', 'config', 'demo'].join('|')})(/|\\.ts$)`,
            message: `src/${room}/ may import only from rooms below it (see DEVELOPERS.md).`,
          },
          ...(room === 'physics'
            ? [{ regex: '^[^.]', message: 'src/physics/ imports nothing outside itself.' }]
            : []),
        ],
      },
    ],
  },
}))

export default tseslint.config(
  { ignores: ['dist/', 'node_modules/', 'openapi/'] },
  js.configs.recommended,
  tseslint.configs.strictTypeChecked,
  {
    files: ['**/*.ts', '**/*.tsx'],
    languageOptions: {
      parserOptions: {
        projectService: true,
        tsconfigRootDir: new URL('..', import.meta.url).pathname,
      },
    },
    rules: {
      // Numbers in messages are the point of this program.
      '@typescript-eslint/restrict-template-expressions': ['error', { allowNumber: true }],
      '@typescript-eslint/no-unnecessary-condition': [
        'error',
        { allowConstantLoopConditions: true },
      ],
      // Typed arrays and parsed rows are read by index all over the physics; bounds are the loop's.
      '@typescript-eslint/no-non-null-assertion': 'error',
      '@typescript-eslint/consistent-type-imports': ['error', { fixStyle: 'inline-type-imports' }],
      '@typescript-eslint/no-unused-vars': [
        'error',
        { argsIgnorePattern: '^_', varsIgnorePattern: '^_' },
      ],
      'no-restricted-syntax': [
        'error',
        { selector: 'ExportDefaultDeclaration', message: 'Named exports only.' },
      ],
    },
  },
  {
    files: ['.config/**'],
    ...tseslint.configs.disableTypeChecked,
    languageOptions: { globals: { URL: 'readonly' } },
    rules: { ...tseslint.configs.disableTypeChecked.rules, 'no-restricted-syntax': 'off' },
  },
  { files: ['**/*.js'], ...tseslint.configs.disableTypeChecked },
  ...roomRules,
  {
    files: ['src/web/**'],
    rules: {
      '@typescript-eslint/no-restricted-imports': [
        'error',
        {
          patterns: [
            {
              regex: `^(\\.\\./)+(${rooms.filter((room) => room !== 'physics').join('|')})/`,
              allowTypeImports: true,
              message: 'src/web/ talks to the service through its API; it may import src/physics/.',
            },
          ],
        },
      ],
    },
  },
)
