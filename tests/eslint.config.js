import js from '@eslint/js'
import prettier from 'eslint-config-prettier'
import vue from 'eslint-plugin-vue'
import globals from 'globals'
import { defineConfig, globalIgnores } from 'eslint/config'
import ts from 'typescript-eslint'

/** Who may import whom (DEVELOPERS.md, "Fences"). One regex per folder: group globs treat `#` as a comment. */
const fence = (files, regex, message) => ({
  files,
  rules: { 'no-restricted-imports': ['error', { patterns: [{ regex, message }] }] },
})

const root = new URL('..', import.meta.url).pathname

export default defineConfig(
  { basePath: root },
  globalIgnores(['dist/', '.cache/', 'node_modules/', 'coverage/', 'data/', 'uploads/']),
  js.configs.recommended,
  ts.configs.recommendedTypeChecked,
  vue.configs['flat/recommended'],
  { files: ['**/*.vue'], languageOptions: { parserOptions: { parser: ts.parser } } },
  {
    languageOptions: {
      parserOptions: {
        projectService: true,
        extraFileExtensions: ['.vue'],
        tsconfigRootDir: root,
      },
    },
    rules: {
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      '@typescript-eslint/switch-exhaustiveness-check': [
        'error',
        { considerDefaultExhaustiveForUnions: true },
      ],
      '@typescript-eslint/restrict-template-expressions': [
        'error',
        { allowNumber: true, allowBoolean: true },
      ],
      '@typescript-eslint/no-confusing-void-expression': 'off',
      'vue/no-v-html': 'error',
      'vue/multi-word-component-names': 'off',
      'vue/require-default-prop': 'off',
      'no-eval': 'error',
      'no-console': ['error', { allow: ['warn', 'error'] }],
    },
  },
  { files: ['src/**'], languageOptions: { globals: globals.browser } },
  { files: ['server/**', 'tests/**', '*.config.ts'], languageOptions: { globals: globals.node } },
  {
    files: ['**/*.js', '**/*.mjs'],
    extends: [ts.configs.disableTypeChecked],
    languageOptions: { globals: globals.node },
    rules: { 'no-console': 'off' },
  },
  { files: ['server/cli/**', 'tests/bench/**'], rules: { 'no-console': 'off' } },
  {
    // Typed lint sees .vue imports in .ts files as `any`.
    files: ['src/main.ts', 'src/App.vue', 'src/views/**/*.vue', 'src/router/*.ts', 'tests/components/**', 'tests/support/**'],
    rules: {
      '@typescript-eslint/no-unsafe-argument': 'off',
      '@typescript-eslint/no-unsafe-assignment': 'off',
    },
  },
  fence(
    ['shared/**'],
    '^(?!zod$|#shared/|\\./|\\.\\./)|^(\\.\\./)+(server|src|tests)/',
    'shared/ imports zod and itself, nothing else.',
  ),
  fence(['src/**'], '^#server/|^(\\.\\./)+server/|^node:', 'The client never imports the server.'),
  fence(
    ['src/components/**'],
    '^#server/|^@/(api|stores|views|router)/|^(\\.\\./)+(api|stores|views|server)/',
    'A component shows: data comes in as props, acts go out as events.',
  ),
  fence(
    ['server/**/*.ts'],
    '^@/|^vue$|^(\\.\\./)+(src|tests)/|^#tests/|^(node:)?child_process$',
    'The server never imports the client or tests, and starts no other program.',
  ),
  fence(
    ['server/routes/**'],
    '^#server/(db|mail|jobs)/|^drizzle-orm|^better-sqlite3',
    'A route calls a service; the service talks to the database.',
  ),
  prettier,
)
