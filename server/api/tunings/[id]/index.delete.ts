import { getRouterParam, sendNoContent } from 'h3'
import { authoriseUser } from '../../../utils/authorise'
import { database } from '../../../utils/database'
import { defineApi } from '../../../utils/handler'
import { notFound } from '../../../utils/problems'
import { deleteTuning } from '../../../utils/tunings'

export default defineApi(async (event) => {
  const user = await authoriseUser(event, 'tuning.keep')
  if (!await deleteTuning(await database(), user.id, getRouterParam(event, 'id') ?? '')) throw notFound()
  return sendNoContent(event)
})
