import type { ArrangementDetail } from '#shared/schemas/arrangement'
import { readArrangement } from '../../../utils/arrangements'
import { authoriseArrangement } from '../../../utils/authorise'
import { database } from '../../../utils/database'
import { defineApi } from '../../../utils/handler'

export default defineApi(async (event): Promise<ArrangementDetail> => {
  const { arrangementId, role } = await authoriseArrangement(event, 'arrangement.read')
  return { ...await readArrangement(await database(), arrangementId), role }
})
