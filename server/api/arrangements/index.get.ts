import type { ArrangementList } from '#shared/schemas/arrangement'
import { listArrangements } from '../../utils/arrangements'
import { authoriseUser } from '../../utils/authorise'
import { database } from '../../utils/database'
import { defineApi } from '../../utils/handler'

export default defineApi(async (event): Promise<ArrangementList> => {
  const user = await authoriseUser(event, 'arrangement.list')
  return { items: await listArrangements(await database(), user.id) }
})
