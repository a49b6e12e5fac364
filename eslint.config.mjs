import boundaries from 'eslint-plugin-boundaries';
import next from 'eslint-config-next';
import nextTypescript from 'eslint-config-next/typescript';

const rooms = [
  ['domain', 'lib/domain/**'],
  ['evidence', 'lib/evidence/**'],
  ['services', 'lib/services/**'],
  ['ports', 'lib/ports/**'],
  ['packet', 'lib/packet/**'],
  ['auth', 'lib/auth/**'],
  ['ground', 'lib/*'],
  ['db', 'db/**'],
  ['components', 'components/**'],
  ['app', 'app/**'],
  ['scripts', 'scripts/**'],
  ['tests', 'tests/**'],
];

/** Which room may import from which. What is not named here is refused. */
const allowed = {
  domain: ['domain', 'evidence'],
  evidence: ['evidence'],
  ground: ['ground'],
  ports: ['ports', 'ground', 'domain', 'evidence'],
  packet: ['packet', 'domain', 'evidence', 'ground', 'ports', 'services'],
  db: ['db', 'ground', 'domain', 'evidence', 'services', 'ports', 'auth'],
  auth: ['auth', 'db', 'ground', 'ports', 'domain'],
  services: ['services', 'db', 'ports', 'packet', 'domain', 'evidence', 'auth', 'ground'],
  components: ['components', 'domain', 'evidence', 'ground', 'services'],
  app: ['app', 'components', 'services', 'auth', 'domain', 'evidence', 'ground'],
  scripts: ['scripts', 'services', 'db', 'ports', 'packet', 'domain', 'evidence', 'auth', 'ground'],
  tests: [
    'tests',
    'app',
    'components',
    'services',
    'db',
    'ports',
    'packet',
    'domain',
    'evidence',
    'auth',
    'ground',
    'scripts',
  ],
};

const pure = {
  patterns: [
    {
      group: ['next', 'next/*', 'react', 'react-dom', 'sequelize', 'server-only', 'node:*', 'fs', 'path', 'crypto'],
      message: 'domain and evidence are pure and run in a browser.',
    },
  ],
};

const config = [
  {
    ignores: ['node_modules/**', '.next*/**', 'data/**', 'tmp/**', 'scripts/verify.mjs', 'public/**', 'next-env.d.ts'],
  },
  ...next,
  ...nextTypescript,
  {
    files: ['**/*.{ts,tsx,mts}'],
    plugins: { boundaries },
    settings: {
      'import/resolver': { typescript: { project: './tsconfig.json' } },
      'boundaries/elements': rooms.map(([type, pattern]) => ({ type, pattern, partialMatch: false })),
    },
    rules: {
      'boundaries/dependencies': [
        'error',
        {
          default: 'disallow',
          policies: Object.entries(allowed).map(([from, to]) => ({
            from: { element: { type: from } },
            allow: { to: { element: { types: { anyOf: to } } } },
          })),
        },
      ],
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_$' }],
      'no-restricted-syntax': [
        'error',
        {
          selector: "CallExpression[callee.name='revalidatePath'][arguments.0.value='/']",
          message: 'This would make /garage again, with scripts its policy does not know.',
        },
      ],
      '@next/next/no-img-element': 'off',
    },
  },
  {
    files: ['lib/domain/**', 'lib/evidence/**'],
    rules: { 'no-restricted-imports': ['error', pure], 'no-restricted-globals': ['error', 'process', 'Buffer'] },
  },
  {
    // useTestDatabase and its like register Vitest hooks, not React's.
    files: ['tests/**'],
    rules: { 'react-hooks/rules-of-hooks': 'off' },
  },
];

export default config;
