import { sinceSchema } from '#shared/schemas/arrangement'
import type { EditsSince } from '#shared/schemas/edit'
import { authoriseArrangement } from '../../../utils/authorise'
import { database } from '../../../utils/database'
import { editsSince } from '../../../utils/edits'
import { defineApi } from '../../../utils/handler'
import { queryValidated } from '../../../utils/readValidated'

export default defineApi(async (event): Promise<EditsSince> => {
  const { arrangementId } = await authoriseArrangement(event, 'arrangement.read')
  const { since } = queryValidated(event, sinceSchema)
  return editsSince(await database(), arrangementId, since)
})
