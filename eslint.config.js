import js from '@eslint/js';
import prettier from 'eslint-config-prettier';
import tseslint from 'typescript-eslint';

// The design's rule: imports point one way. Each room may import only the rooms named here.
// test/architecture.test.ts reads the same table and proves it on every file.
export const mayImport = {
  errors: [],
  // Each file there is joined into one by the build (join-libraries.js).
  libraries: [],
  clock: ['errors'],
  quantity: ['errors'],
  statistics: ['errors'],
  circuit: ['errors', 'statistics'],
  record: ['errors', 'libraries', 'quantity'],
  files: ['errors', 'libraries', 'quantity'],
  instrument: ['errors', 'libraries', 'clock', 'quantity', 'files'],
  bench: ['errors', 'clock', 'quantity', 'files', 'instrument'],
  steps: ['errors', 'libraries', 'clock', 'quantity', 'statistics', 'circuit', 'files', 'record', 'bench'],
  run: ['errors', 'libraries', 'clock', 'quantity', 'circuit', 'files', 'record', 'bench', 'steps'],
  simulation: ['errors', 'clock', 'quantity', 'statistics', 'files', 'instrument', 'circuit'],
  analysis: ['errors', 'quantity', 'statistics', 'circuit', 'record'],
  judgement: ['errors', 'quantity', 'statistics', 'circuit', 'record', 'analysis'],
  arrangement: ['errors', 'quantity', 'statistics', 'circuit', 'record', 'analysis'],
  report: ['errors', 'libraries', 'quantity', 'record', 'analysis', 'judgement', 'arrangement'],
  view: ['errors', 'libraries', 'clock', 'quantity', 'record', 'steps', 'report'],
};
/** Rooms that compute only: no ports, files, clocks or processes. */
export const pure = ['quantity', 'statistics', 'circuit', 'analysis', 'judgement', 'arrangement'];

const rooms = [...Object.keys(mayImport), 'cli'];
const boundaries = Object.entries(mayImport).map(([room, allowed]) => ({
  files: [`src/${room}/**/*.ts`],
  rules: {
    'no-restricted-imports': [
      'error',
      {
        patterns: [
          ...rooms
            .filter((other) => other !== room && !allowed.includes(other))
            .map((other) => ({ group: [`**/${other}/**`], message: `${room} may not import ${other}.` })),
          ...(pure.includes(room) ? [{ group: ['node:*'], message: `${room} only computes.` }] : []),
        ],
      },
    ],
  },
}));

export default tseslint.config(
  { ignores: ['dist', '.speed', 'coverage', 'runs'] },
  js.configs.recommended,
  ...tseslint.configs.strictTypeChecked,
  {
    languageOptions: {
      parserOptions: {
        projectService: { allowDefaultProject: ['eslint.config.js'] },
        tsconfigRootDir: import.meta.dirname,
      },
    },
    rules: {
      '@typescript-eslint/switch-exhaustiveness-check': 'error',
      '@typescript-eslint/restrict-template-expressions': [
        'error',
        { allowNumber: true, allowBoolean: true },
      ],
      '@typescript-eslint/no-unnecessary-condition': ['error', { allowConstantLoopConditions: true }],
      '@typescript-eslint/consistent-type-imports': 'error',
      'no-console': 'error',
      eqeqeq: 'error',
    },
  },
  {
    files: ['test/**/*.ts'],
    ignores: ['test/property.ts'],
    rules: {
      'no-restricted-imports': [
        'error',
        {
          paths: [
            { name: 'fast-check', message: 'test/property.ts chooses the cases, the same in every run.' },
          ],
        },
      ],
    },
  },
  { files: ['**/*.js'], ...tseslint.configs.disableTypeChecked },
  ...boundaries,
  prettier,
);
