/** Prepares the hash that unknown addresses are checked against. */
export default defineNitroPlugin(async () => {
  await prepareSignIn()
})
