import { sendNoContent } from 'h3'
import { authorise } from '../../utils/authorise'
import { defineApi } from '../../utils/handler'
import { signOut } from '../../utils/session'

export default defineApi(async (event) => {
  await authorise(event, 'account.sign-out')
  await signOut(event)
  return sendNoContent(event)
})
