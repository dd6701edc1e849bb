import type { OutboxAnswer } from '#shared/schemas/account'
import { authorise } from '../utils/authorise'
import { database } from '../utils/database'
import { defineApi } from '../utils/handler'
import { outbox } from '../utils/mail'

export default defineApi(async (event): Promise<OutboxAnswer> => {
  await authorise(event, 'outbox.read')
  return { items: await outbox(await database()) }
})
