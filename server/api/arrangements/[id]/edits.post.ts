import { saveEditsSchema, type SaveAnswer } from '#shared/schemas/edit'
import type { StaleProblem } from '#shared/schemas/problem'
import { authoriseArrangement } from '../../../utils/authorise'
import { database } from '../../../utils/database'
import { saveEdits } from '../../../utils/edits'
import { defineApi } from '../../../utils/handler'
import { problem } from '../../../utils/problems'
import { readValidated } from '../../../utils/readValidated'

/** Bytes: an hour of typing offline, or a whole arrangement pasted and taken back. */
const MOST = 16 * 1024 * 1024

export default defineApi(async (event): Promise<SaveAnswer> => {
  const { user, arrangementId } = await authoriseArrangement(event, 'arrangement.edit')
  const body = await readValidated(event, saveEditsSchema, MOST)
  const result = await saveEdits(await database(), { ...body, arrangementId, authorId: user.id })
  if (result.kind === 'saved') return { revision: result.revision }
  if (result.kind === 'refused') throw problem(422, { code: 'refused', message: result.message })
  const { revision, missed } = result
  const stale: StaleProblem = { code: 'stale', message: 'Someone else has saved meanwhile.', revision, missed }
  throw problem(409, stale)
})
