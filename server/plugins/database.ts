/** Ends the pool when the server ends, so that no connection is cut off in the middle of a commit. */
export default defineNitroPlugin((nitro) => {
  nitro.hooks.hook('close', closeDatabase)
})
