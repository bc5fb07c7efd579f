/** Whether the browser has a network at all; true until it says otherwise. */
export function useOnline() {
  const online = ref(true)
  const read = () => {
    online.value = navigator.onLine
  }
  onMounted(() => {
    read()
    window.addEventListener('online', read)
    window.addEventListener('offline', read)
  })
  onBeforeUnmount(() => {
    window.removeEventListener('online', read)
    window.removeEventListener('offline', read)
  })
  return readonly(online)
}
