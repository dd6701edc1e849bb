/** Everything the environment says, read in one place. README lists each variable. */
export interface Config {
  /** local: run for oneself, as by `npm start`: the demo is there and the mailbox lies open. production: neither. */
  readonly mode: 'local' | 'production'
  /** Without a slash at the end. Links in mail start with it. */
  readonly appUrl: string
  readonly databaseUrl: string | undefined
  readonly dataDir: string
  readonly smtpUrl: string | undefined
  readonly mailFrom: string
  readonly demo: boolean
  /** Lower case; this account becomes an administrator when it confirms its address. */
  readonly adminEmail: string | undefined
  /** Believe X-Forwarded-For: only behind a proxy that sets it. */
  readonly trustProxy: boolean
}

type Environment = Readonly<Record<string, string | undefined>>

/** @param dev the development server, which is local by nature */
export function readConfig(env: Environment, dev = false): Config {
  const local = env.COPPERWOUND_MODE ? env.COPPERWOUND_MODE === 'local' : dev || env.NODE_ENV === 'test'
  const mode = local ? 'local' : 'production'
  return {
    mode,
    appUrl: (env.APP_URL || `http://localhost:${env.PORT || 3000}`).replace(/\/+$/, ''),
    databaseUrl: env.DATABASE_URL || undefined,
    dataDir: env.PGLITE_DIR || '.data/pglite',
    smtpUrl: env.SMTP_URL || undefined,
    mailFrom: env.MAIL_FROM || 'Copperwound <no-reply@localhost>',
    demo: env.DEMO ? env.DEMO === 'on' : mode === 'local',
    adminEmail: env.ADMIN_EMAIL?.trim().toLowerCase() || undefined,
    trustProxy: env.TRUST_PROXY === 'on',
  }
}

/** Whether the session cookie goes over https only. A browser drops such a cookie on plain http, where some make no exception for this machine. */
export const isCookieSecure = ({ mode, appUrl }: Config, env: Environment): boolean =>
  env.NUXT_SESSION_COOKIE_SECURE ? env.NUXT_SESSION_COOKIE_SECURE === 'true' : appUrl.startsWith('https:') || (mode === 'production' && !env.APP_URL)

let known: Config | undefined
export const config = (): Config => (known ??= readConfig(process.env, import.meta.dev))
