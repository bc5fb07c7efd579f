/** The width that an element has, followed while it lives; figures are drawn anew for it, never shrunk. */
export function useFigureWidth(initial = 860) {
  const element = useTemplateRef<HTMLElement>('card')
  const width = shallowRef(initial)
  let observer: ResizeObserver | undefined
  onMounted(() => {
    if (!element.value) return
    width.value = element.value.clientWidth || initial
    observer = new ResizeObserver(([entry]) => {
      const next = Math.round(entry?.contentRect.width ?? 0)
      if (next > 0 && next !== width.value) width.value = next
    })
    observer.observe(element.value)
  })
  onScopeDispose(() => observer?.disconnect())
  return width
}
