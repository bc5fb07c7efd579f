/** One tool for lint and format: the flat configuration that Nuxt generates, plus what it may not read. */
// @nuxt/eslint 1.17 calls Object.groupBy, which Node 20 lacks.
Object.groupBy ??= (items, keyOf) => {
  const groups = Object.create(null)
  let i = 0
  for (const item of items) (groups[keyOf(item, i++)] ??= []).push(item)
  return groups
}
const { default: withNuxt } = await import('./.nuxt/eslint.config.mjs')

export default withNuxt(
  { ignores: ['workers/kernel/assembly/**', '.output/**', '.data/**', 'drizzle/**', 'public/**'] },
  {
    rules: {
      'vue/multi-word-component-names': 'off',
      // Short members and attributes may share a line; a line has a meaning, not a count.
      'vue/max-attributes-per-line': 'off',
      'vue/singleline-html-element-content-newline': 'off',
      '@stylistic/member-delimiter-style': 'off',
      '@stylistic/max-statements-per-line': 'off',
    },
  },
)
