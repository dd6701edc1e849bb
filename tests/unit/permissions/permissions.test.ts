import { describe, expect, it } from 'vitest'
import {
  ARRANGEMENT_ACTIONS, ARRANGEMENT_ROLES, PLATFORM_ACTIONS, PLATFORM_ROLES, isArrangementAction, mayInArrangement, mayOnPlatform,
  type ArrangementAction, type ArrangementRole,
} from '../../../shared/permissions'

/** Written out once more, by role, so that a slip in the table shows: who may do what in one arrangement. */
const expected: Readonly<Record<ArrangementRole, readonly ArrangementAction[]>> = {
  'arranger': ARRANGEMENT_ACTIONS,
  'co-arranger': ['arrangement.read', 'arrangement.edit', 'arrangement.rename', 'arrangement.state', 'arrangement.remark', 'arrangement.duplicate', 'arrangement.export'],
  'collaborator': ['arrangement.read', 'arrangement.remark', 'arrangement.duplicate'],
  'performer': ['arrangement.read', 'arrangement.export'],
  'publisher': ['arrangement.read', 'arrangement.remark', 'arrangement.export'],
}

describe('in an arrangement', () => {
  it.each(ARRANGEMENT_ROLES)('a %s may do exactly what the part is', (role) => {
    expect(ARRANGEMENT_ACTIONS.filter(action => mayInArrangement(role, action)).sort()).toEqual([...expected[role]].sort())
  })

  it('who has no part may do nothing', () => {
    expect(ARRANGEMENT_ACTIONS.filter(action => mayInArrangement(null, action))).toEqual([])
  })

  it('whoever may do anything may read', () => {
    for (const role of ARRANGEMENT_ROLES) expect(mayInArrangement(role, 'arrangement.read')).toBe(true)
  })
})

describe('on the platform', () => {
  it('a visitor can get in and see that the service is there, no more', () => {
    expect(PLATFORM_ACTIONS.filter(action => mayOnPlatform('visitor', action)).sort()).toEqual(['account.enter', 'account.sign-out', 'service.ready'])
  })

  it('the mailbox is for administrators and for whoever runs the server for oneself', () => {
    expect(PLATFORM_ROLES.filter(role => mayOnPlatform(role, 'outbox.read')).sort()).toEqual(['admin', 'operator'])
  })

  it('being an administrator opens nobody’s arrangement: those actions are asked of the part, not the account', () => {
    expect(PLATFORM_ACTIONS.filter(isArrangementAction)).toEqual([])
  })
})
