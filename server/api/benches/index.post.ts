/** POST /api/benches - make a bench; its maker becomes its lead. */
import { BenchEditSchema } from '#shared/schemas/api/bench'
import { createBench } from '../../services/benches'

export default defineEventHandler(async (event) => {
  const person = await signedIn(event)
  const { name } = await readInput(event, BenchEditSchema)
  const bench = await createBench(useDatabase(), person.userId, name)
  setResponseStatus(event, 201)
  return bench
})
