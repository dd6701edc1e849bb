import { setResponseStatus } from 'h3'
import { forgotSchema } from '#shared/schemas/account'
import { userByEmail } from '../../utils/accounts'
import { authorise } from '../../utils/authorise'
import { config } from '../../utils/config'
import { database } from '../../utils/database'
import { defineApi } from '../../utils/handler'
import { later } from '../../utils/later'
import { placeOf, use } from '../../utils/limits'
import { resetLetter } from '../../utils/mailTexts'
import { post } from '../../utils/post'
import { readValidated } from '../../utils/readValidated'
import { makeToken } from '../../utils/tokens'

/** The same answer for every address; the message is written afterwards. */
export default defineApi(async (event) => {
  await authorise(event, 'account.enter')
  const { email } = await readValidated(event, forgotSchema)
  await use(event, [{ limit: 'mail-place', key: placeOf(event) }, { limit: 'mail-address', key: email }])
  later('Sending a link for a new password', async () => {
    const db = await database()
    const user = await userByEmail(db, email)
    if (user) await post(email, resetLetter(user.name, `${config().appUrl}/reset#token=${await makeToken(db, user.id, 'reset')}`))
  })
  setResponseStatus(event, 202)
  return {}
})
