import type { OwnTuningList } from '#shared/schemas/tuning'
import { authoriseUser } from '../../utils/authorise'
import { database } from '../../utils/database'
import { defineApi } from '../../utils/handler'
import { listTunings } from '../../utils/tunings'

export default defineApi(async (event): Promise<OwnTuningList> => {
  const user = await authoriseUser(event, 'tuning.keep')
  return { items: await listTunings(await database(), user.id) }
})
