/** The decimal mark that a person reads and types, for `shared/units`. */
export function useDecimal() {
  const preferences = usePreferencesStore()
  return computed<'.' | ','>(() => preferences.decimal === 'comma' ? ',' : '.')
}
