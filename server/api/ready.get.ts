import { authorise } from '../utils/authorise'
import { database } from '../utils/database'
import { defineApi } from '../utils/handler'

/** 200 once the database is open; until then the gate answers 503. */
export default defineApi(async (event) => {
  await authorise(event, 'service.ready')
  await (await database()).execute('select 1')
  return { ready: true }
})
