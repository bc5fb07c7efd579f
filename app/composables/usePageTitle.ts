/** Sets the title of the page, as a value or as a getter that follows what is loaded. */
export function usePageTitle(title: MaybeRefOrGetter<string>) {
  useHead({ title: () => toValue(title) })
}
