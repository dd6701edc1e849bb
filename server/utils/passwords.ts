import type { UserRow } from './accounts'

/** Compared against where there is no account, so that a wrong address takes as long as a wrong password. */
let nobody: Promise<string> | undefined

/** The person, when the password is theirs. Takes the same time in every case. */
export async function checkPassword(user: UserRow | undefined, password: string): Promise<UserRow | null> {
  nobody ??= hashPassword('no account has this password')
  const fits = await verifyPassword(user?.passwordHash ?? await nobody, password)
  return user && fits ? user : null
}
