import withNuxt from './.nuxt/eslint.config.mjs'

export default withNuxt({
  files: ['**/*.ts', '**/*.vue'],
  rules: {
    '@typescript-eslint/no-explicit-any': 'error',
    '@typescript-eslint/consistent-type-imports': 'error',
    'no-restricted-imports': ['error', { paths: [{ name: 'zod/v4', message: 'Schemas use the zod 3 API: a zod 4 schema given to vee-validate validates nothing, silently.' }] }],
  },
}, {
  rules: {
    'vue/multi-word-component-names': 'off',
    // A prop that may be absent says so by its type; a boolean is false.
    'vue/require-default-prop': 'off',
  },
})
