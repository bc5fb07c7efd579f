/** Modules that the build makes (bundle.ts). */
declare module 'virtual:moorage-kernel' {
  /** The bytes of kernel.wasm. */
  const base64: string
  export default base64
}
declare module 'virtual:moorage-examiner' {
  /** file: URL of the examining thread's script. */
  const url: string
  export default url
}
