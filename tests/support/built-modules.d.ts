/** Modules that the server's build makes (server/jobs/bundle.ts), for tests that import the server's rooms. */
declare module 'virtual:moorage-kernel' {
  const base64: string
  export default base64
}
declare module 'virtual:moorage-examiner' {
  const url: () => URL
  export default url
}
