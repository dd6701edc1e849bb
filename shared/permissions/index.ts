/**
 * Who may do what: this table is the only place that decides. The server asks it before every answer, the pages ask it
 * for what to offer.
 */

/** On the platform. `visitor` is signed out; `operator` is anyone at a server that is run locally, where the mailbox lies open. */
export const PLATFORM_ROLES = ['visitor', 'member', 'admin', 'operator'] as const
export type PlatformRole = typeof PLATFORM_ROLES[number]

/** What an account can be. */
export const ACCOUNT_ROLES = ['member', 'admin'] as const
export type AccountRole = typeof ACCOUNT_ROLES[number]

/** In one arrangement. */
export const ARRANGEMENT_ROLES = ['arranger', 'co-arranger', 'collaborator', 'performer', 'publisher'] as const
export type ArrangementRole = typeof ARRANGEMENT_ROLES[number]

const platform = {
  'account.enter': ['visitor', 'member', 'admin'],
  'account.sign-out': ['visitor', 'member', 'admin'],
  'account.password': ['member', 'admin'],
  'arrangement.list': ['member', 'admin'],
  'arrangement.create': ['member', 'admin'],
  /** One's own: to list, save, change and delete them. */
  'tuning.keep': ['member', 'admin'],
  'outbox.read': ['operator', 'admin'],
  'service.ready': ['visitor', 'member', 'admin'],
} as const satisfies Record<string, readonly PlatformRole[]>

const arrangement = {
  'arrangement.read': ['arranger', 'co-arranger', 'collaborator', 'performer', 'publisher'],
  'arrangement.edit': ['arranger', 'co-arranger'],
  'arrangement.rename': ['arranger', 'co-arranger'],
  'arrangement.state': ['arranger', 'co-arranger'],
  'arrangement.remark': ['arranger', 'co-arranger', 'collaborator', 'publisher'],
  'arrangement.duplicate': ['arranger', 'co-arranger', 'collaborator'],
  'arrangement.export': ['arranger', 'co-arranger', 'performer', 'publisher'],
  'arrangement.invite': ['arranger'],
  'arrangement.delete': ['arranger'],
  'arrangement.restore': ['arranger'],
} as const satisfies Record<string, readonly ArrangementRole[]>

export type PlatformAction = keyof typeof platform
export type ArrangementAction = keyof typeof arrangement
export type Action = PlatformAction | ArrangementAction

export const PLATFORM_ACTIONS = Object.keys(platform) as PlatformAction[]
export const ARRANGEMENT_ACTIONS = Object.keys(arrangement) as ArrangementAction[]

const includes = (roles: readonly string[], role: string) => roles.includes(role)

/** May someone with this role on the platform do it? */
export const mayOnPlatform = (role: PlatformRole, action: PlatformAction): boolean => includes(platform[action], role)

/** May someone with this role in an arrangement do it there? null: no part in it at all. */
export const mayInArrangement = (role: ArrangementRole | null, action: ArrangementAction): boolean =>
  role !== null && includes(arrangement[action], role)

export const isArrangementAction = (action: Action): action is ArrangementAction => action in arrangement
