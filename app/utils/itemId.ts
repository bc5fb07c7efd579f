/** Whatever an address says: only what can be the id of an item is asked for. */
export const isItemId = (text: string): boolean => /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/.test(text)
