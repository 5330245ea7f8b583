import next from 'eslint-config-next/core-web-vitals';
import nextTypescript from 'eslint-config-next/typescript';
import prettier from 'eslint-config-prettier/flat';

/** Which way things depend (DEVELOPERS.md); each line is a folder and what it may never import, not even a type. */
const FORBIDDEN = {
  analysis: ['app', 'components', 'editor', 'db', 'ws-server', 'scripts', 'tests'],
  db: ['app', 'components', 'editor', 'ws-server', 'scripts', 'tests'],
  editor: ['app', 'components', 'ws-server', 'scripts', 'tests'],
  components: ['ws-server', 'scripts', 'tests'],
  app: ['ws-server', 'scripts', 'tests'],
  'ws-server': ['app', 'components', 'scripts', 'tests'],
  scripts: ['app', 'components', 'editor', 'ws-server', 'tests'],
};

const zones = [
  ...Object.entries(FORBIDDEN).map(([target, from]) => ({
    target: `./${target}`,
    from: from.map((folder) => `./${folder}`),
    message: 'Imports run one way: see DEVELOPERS.md.',
  })),
  {
    target: './ws-server',
    from: './editor',
    except: ['./schema', './close-codes.ts'],
    message: 'The websocket server reads the schema and the close codes, not the view.',
  },
];

/** What reaches the browser may run only these parts of db; types cost nothing there and are free. */
const browserSafe = {
  regex: '(^@/|(^|/)\\.\\./)db/(?!inputs/|errors$|integrity/)',
  allowTypeImports: true,
  message: 'Only db/inputs, db/errors and db/integrity are safe in a browser; import the rest as types.',
};
const notFromApp = {
  regex: '(^@/|(^|/)\\.\\./)app/',
  allowTypeImports: true,
  message: 'app imports components, not the other way round.',
};
const restrictImports = (...patterns) => ({
  '@typescript-eslint/no-restricted-imports': ['error', { patterns }],
});

// Circles and files that nobody imports are looked for in tests/scripts/tidy.test.ts, in a fiftieth of the time.
const config = [
  { ignores: ['.next/', '.motebook/', 'drizzle/', 'next-env.d.ts', 'test-results/'] },
  ...next,
  ...nextTypescript,
  {
    settings: { 'import/resolver': { typescript: { project: './tsconfig.json' } } },
    rules: {
      'import/no-restricted-paths': ['error', { zones }],
      'import/no-duplicates': 'error',
      '@typescript-eslint/consistent-type-imports': ['error', { fixStyle: 'inline-type-imports' }],
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      eqeqeq: 'error',
      'no-eval': 'error',
    },
  },
  {
    // A promise that nobody waits for loses its error; this needs types.
    files: ['**/*.ts', '**/*.tsx'],
    languageOptions: { parserOptions: { projectService: true } },
    rules: {
      '@typescript-eslint/no-floating-promises': 'error',
      '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: { attributes: false } }],
      '@typescript-eslint/switch-exhaustiveness-check': [
        'error',
        { considerDefaultExhaustiveForUnions: true },
      ],
    },
  },
  { files: ['components/**'], rules: restrictImports(browserSafe, notFromApp) },
  { files: ['editor/**'], rules: restrictImports(browserSafe) },
  // A component in a test may hand what it saw to the test around it.
  { files: ['tests/**'], rules: { 'react-hooks/globals': 'off' } },
  prettier,
];

export default config;
