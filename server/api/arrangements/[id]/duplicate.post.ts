import { setResponseStatus } from 'h3'
import type { ArrangementCreated } from '#shared/schemas/arrangement'
import { duplicateArrangement } from '../../../utils/arrangements'
import { authoriseArrangement } from '../../../utils/authorise'
import { database } from '../../../utils/database'
import { defineApi } from '../../../utils/handler'

export default defineApi(async (event): Promise<ArrangementCreated> => {
  const { user, arrangementId } = await authoriseArrangement(event, 'arrangement.duplicate')
  setResponseStatus(event, 201)
  return { id: await duplicateArrangement(await database(), user.id, arrangementId) }
})
