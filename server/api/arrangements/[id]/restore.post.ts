import { restoreArrangement } from '../../../utils/arrangements'
import { authoriseArrangement } from '../../../utils/authorise'
import { database } from '../../../utils/database'
import { defineApi } from '../../../utils/handler'

export default defineApi(async (event) => {
  const { arrangementId } = await authoriseArrangement(event, 'arrangement.restore', true)
  await restoreArrangement(await database(), arrangementId)
  return {}
})
