import { defineStore } from 'pinia'
import { ref, shallowRef } from 'vue'
import type { ArrangementCreated, ArrangementList, ArrangementSummary, NewArrangement, PatchArrangement } from '#shared/schemas/arrangement'
import type { Score } from '#shared/score/types'

type Request = <T>(url: string, options?: { method?: 'POST' | 'PATCH' | 'DELETE', body?: object }) => Promise<T>
/** Nuxt's own request function, which carries the session on the server as well. */
const request: Request = (url, options) => $fetch(url, options)

/** The arrangements that I may see. What is shown changes at once; when the server refuses it is put back, and the refusal is thrown. */
export const useFolio = defineStore('folio', () => {
  const items = shallowRef<readonly ArrangementSummary[]>([])
  /** The last one deleted, while it can be taken back by one press. */
  const deleted = ref<ArrangementSummary | null>(null)
  const put = (changed: ArrangementSummary) => (items.value = items.value.map(item => (item.id === changed.id ? changed : item)))

  /** @param get answers requests; on the server the one that carries the person's session */
  async function load(get: Request = request) {
    items.value = (await get<ArrangementList>('/api/arrangements')).items
  }
  async function create(body: NewArrangement | { readonly score: Score }): Promise<string> {
    return (await request<ArrangementCreated>('/api/arrangements', { method: 'POST', body })).id
  }
  async function patch(item: ArrangementSummary, change: PatchArrangement) {
    put({ ...item, ...change, changedAt: new Date().toISOString() })
    try {
      await request(`/api/arrangements/${item.id}`, { method: 'PATCH', body: change })
    }
    catch (error) {
      put(item)
      throw error
    }
  }
  async function duplicate(item: ArrangementSummary): Promise<string> {
    const { id } = await request<ArrangementCreated>(`/api/arrangements/${item.id}/duplicate`, { method: 'POST' })
    await load()
    return id
  }
  async function remove(item: ArrangementSummary) {
    items.value = items.value.filter(({ id }) => id !== item.id)
    try {
      await request(`/api/arrangements/${item.id}`, { method: 'DELETE' })
      deleted.value = item
    }
    catch (error) {
      items.value = [...items.value, item]
      throw error
    }
  }
  async function restore(item: ArrangementSummary) {
    await request(`/api/arrangements/${item.id}/restore`, { method: 'POST' })
    items.value = [...items.value, item]
    deleted.value = null
  }
  return { items, deleted, load, create, patch, duplicate, remove, restore }
})
