import { sinceSchema } from '#shared/schemas/arrangement'
import type { EditsSince } from '#shared/schemas/edit'
import { authoriseArrangement } from '../../../utils/authorise'
import { database } from '../../../utils/database'
import { defineApi } from '../../../utils/handler'
import { queryValidated } from '../../../utils/readValidated'
import { batchesAfter } from '../../../utils/scores'

export default defineApi(async (event): Promise<EditsSince> => {
  const { arrangementId } = await authoriseArrangement(event, 'arrangement.read')
  const { since } = queryValidated(event, sinceSchema)
  const batches = await batchesAfter(await database(), arrangementId, since)
  return { revision: batches.at(-1)?.revision ?? since, batches }
})
