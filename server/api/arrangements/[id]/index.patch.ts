import { patchArrangementSchema } from '#shared/schemas/arrangement'
import { setState } from '../../../utils/arrangements'
import { authoriseArrangement } from '../../../utils/authorise'
import { database } from '../../../utils/database'
import { rename } from '../../../utils/edits'
import { defineApi } from '../../../utils/handler'
import { problem } from '../../../utils/problems'
import { readValidated } from '../../../utils/readValidated'

export default defineApi(async (event) => {
  const { user, arrangementId } = await authoriseArrangement(event, 'arrangement.read')
  const { title, state } = await readValidated(event, patchArrangementSchema)
  if (title !== undefined) await authoriseArrangement(event, 'arrangement.rename')
  if (state !== undefined) await authoriseArrangement(event, 'arrangement.state')
  const db = await database()
  if (title !== undefined) {
    const result = await rename(db, user.id, arrangementId, title)
    if (result.kind === 'refused') throw problem(422, { code: 'refused', message: result.message })
  }
  if (state !== undefined) await setState(db, arrangementId, state)
  return {}
})
