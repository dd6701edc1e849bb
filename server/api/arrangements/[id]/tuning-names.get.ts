import type { TuningNames } from '#shared/schemas/tuning'
import { authoriseArrangement } from '../../../utils/authorise'
import { database } from '../../../utils/database'
import { defineApi } from '../../../utils/handler'
import { tuningNames } from '../../../utils/tunings'

export default defineApi(async (event): Promise<TuningNames> => {
  const { arrangementId } = await authoriseArrangement(event, 'arrangement.read')
  return { items: await tuningNames(await database(), arrangementId) }
})
