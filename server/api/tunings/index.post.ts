import { setResponseStatus } from 'h3'
import { newTuningSchema, type TuningCreated } from '#shared/schemas/tuning'
import { authoriseUser } from '../../utils/authorise'
import { database } from '../../utils/database'
import { defineApi } from '../../utils/handler'
import { readValidated } from '../../utils/readValidated'
import { createTuning, noRoom, requireStrings } from '../../utils/tunings'

export default defineApi(async (event): Promise<TuningCreated> => {
  const user = await authoriseUser(event, 'tuning.keep')
  const body = await readValidated(event, newTuningSchema)
  requireStrings(body.strings)
  const id = await createTuning(await database(), user.id, body)
  if (!id) throw noRoom()
  setResponseStatus(event, 201)
  return { id }
})
