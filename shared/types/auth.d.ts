import type { SessionUser } from '../schemas/account'

declare module '#auth-utils' {
  // What the session says about the person; read in the browser by useUserSession().
  // eslint-disable-next-line @typescript-eslint/no-empty-object-type
  interface User extends SessionUser {}
  interface SecureSessionData {
    /** Row in the sessions table; never sent to the browser in the clear. */
    readonly sessionId: string
  }
}

export {}
