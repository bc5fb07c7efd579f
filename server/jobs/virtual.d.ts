/** Modules that the build makes (bundle.ts). */
declare module 'virtual:moorage-kernel' {
  /** The bytes of kernel.wasm. */
  const base64: string
  export default base64
}
declare module 'virtual:moorage-examiner' {
  /** file: URL of the examining thread's script; known once the server has started. */
  const url: () => URL
  export default url
}
