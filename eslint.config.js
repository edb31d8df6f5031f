import tseslint from 'typescript-eslint'
import vue from 'eslint-plugin-vue'

const noFetch = {
  selector: "CallExpression[callee.name='fetch']",
  message: 'Only src/api/client.ts talks to the server.',
}
const noSkippedTests = {
  selector: "MemberExpression[object.name=/^(test|describe|it)$/][property.name=/^(only|skip)$/]",
  message: 'A test is run or removed, never skipped or run alone.',
}

export default tseslint.config(
  { ignores: ['dist/**', 'var/**', 'coverage/**', 'node_modules/**', 'test-results/**', 'playwright-report/**'] },
  ...tseslint.configs.strictTypeChecked,
  ...vue.configs['flat/recommended'],
  {
    languageOptions: {
      parserOptions: { projectService: true, extraFileExtensions: ['.vue'], parser: tseslint.parser },
    },
    rules: {
      'no-console': 'error',
      'no-empty': ['error', { allowEmptyCatch: false }],
      'no-restricted-syntax': ['error', noFetch, noSkippedTests],
      '@typescript-eslint/consistent-type-assertions': ['error', { assertionStyle: 'as', objectLiteralTypeAssertions: 'never' }],
      '@typescript-eslint/restrict-template-expressions': ['error', { allowNumber: true, allowBoolean: true }],
      '@typescript-eslint/no-confusing-void-expression': ['error', { ignoreArrowShorthand: true }],
      // `for (let i …) array[i]!` is the plain way through a typed array whose bounds the loop itself guards.
      '@typescript-eslint/no-non-null-assertion': 'off',
      'vue/multi-word-component-names': 'error',
      'vue/no-v-html': 'error',
      // Prettier formats the templates; these three would fight it.
      'vue/max-attributes-per-line': 'off',
      'vue/singleline-html-element-content-newline': 'off',
      'vue/html-self-closing': 'off',
      'vue/html-indent': 'off',
      'vue/html-closing-bracket-newline': 'off',
      'vue/multiline-html-element-content-newline': 'off',
      'vue/first-attribute-linebreak': 'off',
    },
  },
  { files: ['**/*.js', '**/*.mjs'], ...tseslint.configs.disableTypeChecked },
  { files: ['src/api/client.ts', 'tests/**'], rules: { 'no-restricted-syntax': ['error', noSkippedTests] } },
  { files: ['scripts/**', 'tests/bench/**'], rules: { 'no-console': 'off' } },
)
