import { changePasswordSchema } from '#shared/schemas/account'
import { changePassword, userByEmail } from '../../utils/accounts'
import { authoriseUser } from '../../utils/authorise'
import { config } from '../../utils/config'
import { database } from '../../utils/database'
import { defineApi } from '../../utils/handler'
import { later } from '../../utils/later'
import { giveBack, use } from '../../utils/limits'
import { changedLetter } from '../../utils/mailTexts'
import { checkPassword } from '../../utils/passwords'
import { post } from '../../utils/post'
import { problem } from '../../utils/problems'
import { readValidated } from '../../utils/readValidated'
import { currentUser } from '../../utils/session'

export default defineApi(async (event) => {
  const { id, email, name } = await authoriseUser(event, 'account.password')
  const { current, password } = await readValidated(event, changePasswordSchema)
  const uses = [{ limit: 'password', key: id }] as const
  await use(event, uses)
  const db = await database()
  if (!await checkPassword(await userByEmail(db, email), current)) throw problem(400, { code: 'wrong-credentials', field: 'current', message: 'This is not your present password.' })
  await giveBack(uses)
  await changePassword(db, id, await hashPassword(password), (await currentUser(event))!.sessionId)
  later('Telling of a changed password', () => post(email, changedLetter(name, `${config().appUrl}/forgot`)))
  return {}
})
