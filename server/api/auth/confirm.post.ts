import { confirmSchema, type UserAnswer } from '#shared/schemas/account'
import { confirm } from '../../utils/accounts'
import { authorise } from '../../utils/authorise'
import { database } from '../../utils/database'
import { defineApi } from '../../utils/handler'
import { problem } from '../../utils/problems'
import { readValidated } from '../../utils/readValidated'
import { signIn } from '../../utils/session'

export default defineApi(async (event): Promise<UserAnswer> => {
  await authorise(event, 'account.enter')
  const { token } = await readValidated(event, confirmSchema)
  const user = await confirm(await database(), token)
  if (!user) throw problem(400, { code: 'bad-token', field: 'token', message: 'This link was used already or is too old.', help: 'Sign in if your address is confirmed; else register again and a new link will come.' })
  return { user: await signIn(event, user) }
})
