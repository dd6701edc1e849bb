import { getRouterParam } from 'h3'
import { authoriseUser } from '../../../utils/authorise'
import { database } from '../../../utils/database'
import { defineApi } from '../../../utils/handler'
import { notFound } from '../../../utils/problems'
import { noRoom, restoreTuning } from '../../../utils/tunings'

export default defineApi(async (event) => {
  const user = await authoriseUser(event, 'tuning.keep')
  const result = await restoreTuning(await database(), user.id, getRouterParam(event, 'id') ?? '')
  if (result === 'absent') throw notFound()
  if (result === 'full') throw noRoom()
  return {}
})
