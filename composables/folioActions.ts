import { mayInArrangement, type ArrangementAction } from '#shared/permissions'
import type { ArrangementSummary } from '#shared/schemas/arrangement'
import type { MenuItem } from './menuItem'

export type RowAction = 'rename' | 'duplicate' | 'ready' | 'draft' | 'delete'

const ACTIONS: readonly (MenuItem & { readonly id: RowAction, readonly needs: ArrangementAction, readonly when?: (item: ArrangementSummary) => boolean })[] = [
  { id: 'rename', label: 'Rename…', needs: 'arrangement.rename' },
  { id: 'duplicate', label: 'Duplicate', needs: 'arrangement.duplicate' },
  { id: 'ready', label: 'Mark as ready', needs: 'arrangement.state', when: item => item.state === 'draft' },
  { id: 'draft', label: 'Back to draft', needs: 'arrangement.state', when: item => item.state === 'ready' },
  { id: 'delete', label: 'Delete', needs: 'arrangement.delete', danger: true },
]

/** What this person may do with this arrangement now. */
export const actionsFor = (item: ArrangementSummary): readonly (MenuItem & { readonly id: RowAction })[] =>
  ACTIONS.filter(({ needs, when }) => mayInArrangement(item.role, needs) && (when?.(item) ?? true))

export const isRowAction = (id: string): id is RowAction => ACTIONS.some(action => action.id === id)
