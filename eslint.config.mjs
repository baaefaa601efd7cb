import withNuxt from './.nuxt/eslint.config.mjs'

export default withNuxt(
  { ignores: ['public/tiles/**', 'drizzle/**', '.output/**', '.data/**'] },
  {
    rules: {
      'vue/multi-word-component-names': 'off',
      'vue/html-self-closing': 'off',
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/unified-signatures': 'off',
    },
  },
)
