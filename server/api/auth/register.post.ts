import { setResponseStatus } from 'h3'
import { registerSchema } from '#shared/schemas/account'
import { register, userByEmail } from '../../utils/accounts'
import { authorise } from '../../utils/authorise'
import { config } from '../../utils/config'
import { database } from '../../utils/database'
import { defineApi } from '../../utils/handler'
import { later } from '../../utils/later'
import { placeOf, use } from '../../utils/limits'
import { confirmLetter, knownLetter } from '../../utils/mailTexts'
import { post } from '../../utils/post'
import { readValidated } from '../../utils/readValidated'

/** The answer and its time are the same whether or not the address is known: what differs happens afterwards. */
export default defineApi(async (event) => {
  await authorise(event, 'account.enter')
  const { name, email, password } = await readValidated(event, registerSchema)
  await use(event, [{ limit: 'mail-place', key: placeOf(event) }, { limit: 'mail-address', key: email }])
  const passwordHash = await hashPassword(password)
  later('Registering', async () => {
    const db = await database()
    const made = await register(db, { name, email, passwordHash })
    if (made) return post(email, confirmLetter(name, `${config().appUrl}/confirm#token=${made.token}`))
    return post(email, knownLetter((await userByEmail(db, email))?.name ?? name, `${config().appUrl}/forgot`))
  })
  setResponseStatus(event, 202)
  return {}
})
