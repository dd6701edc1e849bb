import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { acknowledge, batchOf, emptyQueue, enqueue, fittingCount, rebaseQueue, retryDelay, saveSentence, sendTime, startSending, type SaveQueue } from '../../../shared/editor/saving'

const step = (label: string) => ({ label, edits: [] })
const labels = (queue: SaveQueue) => queue.unsent.map(each => each.label)

describe('the queue of unsent work', () => {
  it('gives the batch without an answer again as it was, though more was typed since', () => {
    const sent = startSending(enqueue(emptyQueue('tab', 7), step('a')))
    const later = startSending(enqueue(sent, step('b')))
    expect(batchOf(later)).toEqual({ clientId: 'tab', seq: 1, base: 7, transactions: [step('a')] })
  })

  it('goes on from the acknowledged revision with the next sequence', () => {
    const first = enqueue(startSending(enqueue(emptyQueue('tab', 7), step('a'))), step('b'))
    expect(batchOf(startSending(acknowledge(first, 8)))).toEqual({ clientId: 'tab', seq: 2, base: 8, transactions: [step('b')] })
  })

  it('never uses a sequence again after a batch was turned away', () => {
    const refused = startSending(enqueue(emptyQueue('tab', 7), step('a')))
    expect(batchOf(startSending(rebaseQueue(refused, 12, [step('a, moved')])))).toEqual({ clientId: 'tab', seq: 2, base: 12, transactions: [step('a, moved')] })
  })

  it('loses nothing and sends nothing twice, whatever the order of typing, sending and answers', () => {
    const act = fc.constantFrom('type', 'send', 'answer', 'limit')
    fc.assert(fc.property(fc.array(act, { maxLength: 60 }), (acts) => {
      let queue = emptyQueue('tab', 0)
      const typed: string[] = []
      const arrived: string[] = []
      const answer = () => {
        const batch = batchOf(queue)
        if (!batch) return
        arrived.push(...batch.transactions.map(each => each.label))
        queue = acknowledge(queue, batch.base + 1)
      }
      for (const each of acts) {
        if (each === 'type') {
          typed.push(`${typed.length}`)
          queue = enqueue(queue, step(typed.at(-1)!))
        }
        if (each === 'send') queue = startSending(queue)
        if (each === 'limit') queue = startSending(queue, 2)
        if (each === 'answer') answer()
      }
      expect([...arrived, ...labels(queue)]).toEqual(typed)
      expect(new Set(queue.unsent.map(each => each.number)).size).toBe(queue.unsent.length)
    }))
  })
})

describe('times', () => {
  it('waits 600 ms after the last key and never longer than 3 s after the first', () => {
    expect(sendTime(0, 0)).toBe(600)
    expect(sendTime(0, 1500)).toBe(2100)
    expect(sendTime(0, 2900)).toBe(3000)
  })

  it('waits longer after every failure, up to half a minute, and not always the same', () => {
    expect([1, 2, 3, 9].map(failures => retryDelay(failures, 0))).toEqual([500, 1000, 2000, 15_000])
    expect([1, 2, 3, 9].map(failures => retryDelay(failures, 1))).toEqual([1000, 2000, 4000, 30_000])
  })
})

describe('what the header says', () => {
  const clean = { unsent: 0, kept: true, hindrance: null, savedAt: null }
  it.each([
    [clean, 'Saved'],
    [{ ...clean, savedAt: 1 }, 'Saved 14:02'],
    [{ ...clean, unsent: 2 }, 'Saving …'],
    [{ ...clean, unsent: 1, hindrance: { kind: 'offline' } }, 'Offline, 1 edit kept on this device'],
    [{ ...clean, unsent: 12, kept: false, hindrance: { kind: 'offline' } }, 'Offline, 12 edits only in this tab: keep it open'],
    [{ ...clean, unsent: 3, hindrance: { kind: 'trouble', reason: 'busy' } }, 'Not saved, 3 edits kept on this device'],
    [{ ...clean, unsent: 3, hindrance: { kind: 'signed-out' } }, 'Signed out, 3 edits kept on this device'],
  ] as const)('%o', (status, sentence) => expect(saveSentence(status, () => '14:02')).toBe(sentence))
})

describe('what a closing page can still send', () => {
  const queue = ['a', 'b', 'c'].reduce((all, label) => enqueue(all, step(label)), emptyQueue('tab', 0))
  const one = JSON.stringify(queue.unsent[0]).length * 2
  it.each([[0, 0], [one - 1, 0], [one, 1], [one * 2.5, 2], [one * 9, 3]])('%d bytes hold %d', (bytes, count) => expect(fittingCount(queue.unsent, bytes)).toBe(count))
})
