/** POST /api/benches/:benchId/uploads?name= - keep a file as it is; recordings are then made from it. */
import { UploadQuerySchema } from '#shared/schemas/api/recording'
import { RECORDING_LIMITS } from '#shared/schemas/recording'
import { keepUpload } from '../../../services/uploads'

export default defineEventHandler(async (event) => {
  const member = await requireMember(event, 'recording.create')
  const { name } = readQuery(event, UploadQuerySchema)
  const bytes = await readFile(event, RECORDING_LIMITS.fileBytes)
  const { upload, fresh } = await keepUpload(useDatabase(), member, name, bytes)
  setResponseStatus(event, fresh ? 201 : 200)
  return upload
})
