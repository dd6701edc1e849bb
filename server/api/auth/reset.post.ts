import { resetSchema } from '#shared/schemas/account'
import { resetPassword } from '../../utils/accounts'
import { authorise } from '../../utils/authorise'
import { config } from '../../utils/config'
import { database } from '../../utils/database'
import { defineApi } from '../../utils/handler'
import { later } from '../../utils/later'
import { placeOf, use } from '../../utils/limits'
import { changedLetter } from '../../utils/mailTexts'
import { post } from '../../utils/post'
import { problem } from '../../utils/problems'
import { readValidated } from '../../utils/readValidated'

export default defineApi(async (event) => {
  await authorise(event, 'account.enter')
  const { token, password } = await readValidated(event, resetSchema)
  await use(event, [{ limit: 'sign-in-place', key: placeOf(event) }])
  const user = await resetPassword(await database(), token, await hashPassword(password))
  if (!user) throw problem(400, { code: 'bad-token', field: 'token', message: 'This link was used already or is too old.', help: 'Ask for a new one.' })
  later('Telling of a changed password', () => post(user.email, changedLetter(user.name, `${config().appUrl}/forgot`)))
  return {}
})
