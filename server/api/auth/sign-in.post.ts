import { signInSchema, type UserAnswer } from '#shared/schemas/account'
import { userByEmail } from '../../utils/accounts'
import { authorise } from '../../utils/authorise'
import { database } from '../../utils/database'
import { defineApi } from '../../utils/handler'
import { giveBack, placeOf, use } from '../../utils/limits'
import { checkPassword } from '../../utils/passwords'
import { problem } from '../../utils/problems'
import { readValidated } from '../../utils/readValidated'
import { signIn } from '../../utils/session'

export default defineApi(async (event): Promise<UserAnswer> => {
  await authorise(event, 'account.enter')
  const { email, password } = await readValidated(event, signInSchema)
  const place = placeOf(event)
  const uses = [
    { limit: 'sign-in-place', key: place }, { limit: 'sign-in', key: `${place} ${email}` }, { limit: 'sign-in-address', key: email },
  ] as const
  await use(event, uses)
  const user = await checkPassword(await userByEmail(await database(), email), password)
  if (!user) throw problem(401, { code: 'wrong-credentials', message: 'Address and password do not belong together.', help: 'Check both, or ask for a new password.' })
  await giveBack(uses)
  if (!user.confirmedAt) throw problem(403, { code: 'unconfirmed', message: 'This address is not confirmed yet.', help: 'Open the link in the message that was sent to it, or register again for a new one.' })
  return { user: await signIn(event, user) }
})
