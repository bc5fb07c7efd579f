/** Takes up audits that an earlier process left, and ends the threads with the server. */
export default defineNitroPlugin((nitro) => {
  resumeAudits().catch(error => console.error('[audit] not resumed:', error instanceof Error ? error.message : error))
  nitro.hooks.hook('close', endExaminers)
})
