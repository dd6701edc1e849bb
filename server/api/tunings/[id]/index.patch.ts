import { getRouterParam } from 'h3'
import { patchTuningSchema } from '#shared/schemas/tuning'
import { authoriseUser } from '../../../utils/authorise'
import { database } from '../../../utils/database'
import { defineApi } from '../../../utils/handler'
import { notFound } from '../../../utils/problems'
import { readValidated } from '../../../utils/readValidated'
import { patchTuning, requireStrings } from '../../../utils/tunings'

export default defineApi(async (event) => {
  const user = await authoriseUser(event, 'tuning.keep')
  const body = await readValidated(event, patchTuningSchema)
  if (body.strings) requireStrings(body.strings)
  if (!await patchTuning(await database(), user.id, getRouterParam(event, 'id') ?? '', body)) throw notFound()
  return {}
})
