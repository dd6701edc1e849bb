import { sendNoContent } from 'h3'
import { deleteArrangement } from '../../../utils/arrangements'
import { authoriseArrangement } from '../../../utils/authorise'
import { database } from '../../../utils/database'
import { defineApi } from '../../../utils/handler'

export default defineApi(async (event) => {
  const { arrangementId } = await authoriseArrangement(event, 'arrangement.delete')
  await deleteArrangement(await database(), arrangementId)
  return sendNoContent(event)
})
