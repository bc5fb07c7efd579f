/** GET /api/recordings/:recordingId/original - the file byte for byte as it came, never shown by the browser itself. */
import { readOriginal } from '../../../services/uploads'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'recording.read')
  const { fileName, bytes, sha256 } = await readOriginal(useDatabase(), member.itemId)
  setResponseHeaders(event, {
    'content-type': 'application/octet-stream',
    'content-disposition': `attachment; filename="${fileName.replace(/[^\x20-\x7E]|["\\]/g, '_')}"; filename*=UTF-8''${encodeURIComponent(fileName)}`,
    'x-content-type-options': 'nosniff',
    'digest': `sha-256=${Buffer.from(sha256, 'hex').toString('base64')}`,
  })
  return bytes
})
