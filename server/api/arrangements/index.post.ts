import { randomBytes } from 'node:crypto'
import { setResponseStatus } from 'h3'
import { createArrangementSchema, type ArrangementCreated } from '#shared/schemas/arrangement'
import { createIds, sessionPrefix } from '#shared/editor/ids'
import { createScore } from '#shared/score/create'
import { validateScore } from '#shared/score/validate'
import { createArrangement } from '../../utils/arrangements'
import { authoriseUser } from '../../utils/authorise'
import { database } from '../../utils/database'
import { defineApi } from '../../utils/handler'
import { problem } from '../../utils/problems'
import { readValidated } from '../../utils/readValidated'

/** Bytes: 200 dense bars take about 300 kB. */
const MOST = 8 * 1024 * 1024

export default defineApi(async (event): Promise<ArrangementCreated> => {
  const user = await authoriseUser(event, 'arrangement.create')
  const body = await readValidated(event, createArrangementSchema, MOST)
  const score = 'score' in body ? body.score : createScore({ arranger: user.name, ...body }, createIds(sessionPrefix(randomBytes)).next)
  const wrong = validateScore(score)
  if (wrong) throw problem(422, { code: 'refused', message: wrong })
  setResponseStatus(event, 201)
  return { id: await createArrangement(await database(), user.id, score) }
})
