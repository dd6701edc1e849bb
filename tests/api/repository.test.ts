import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import fc from 'fast-check'
import { and, eq } from 'drizzle-orm'
import type { DbHandle } from '../../server/db/client'
import { openDb } from '../../server/db/client'
import { prepare } from '../../server/db/migrate'
import { arrangements, members, revisions, snapshots, tokens, users } from '../../server/db/schema'
import { changePassword, confirm, openSession, register, resetPassword, sessionOwner, userByEmail } from '../../server/utils/accounts'
import { createArrangement, deleteArrangement, duplicateArrangement, listArrangements, readArrangement, restoreArrangement, roleIn } from '../../server/utils/arrangements'
import { DEMO_PEOPLE, layOutDemo } from '../../server/utils/demo'
import { editsSince, rename, saveEdits, type Save } from '../../server/utils/edits'
import { finishLater } from '../../server/utils/later'
import { SNAPSHOT_EVERY } from '../../server/utils/scores'
import { makeToken, useToken } from '../../server/utils/tokens'
import { createTuning, deleteTuning, listTunings, patchTuning, restoreTuning, tuningNames } from '../../server/utils/tunings'
import { applyEdits, isRefused, type Edit } from '../../shared/edits'
import { OWN_TUNINGS } from '../../shared/schemas/tuning'
import type { OpenString, Score } from '../../shared/score/types'
import { hasPostgres, memoryDatabase, migrations, startPostgres, type Postgres } from '../support/database'
import { parseScore } from '../support/score'

// A busy machine takes long to start a server.
vi.setConfig({ testTimeout: 90_000, hookTimeout: 120_000 })

const PORT = 4410
let postgres: Postgres | undefined
if (!hasPostgres) console.warn('Skipped: the same tests on a PostgreSQL server, which is not installed (apt-get install postgresql).')

const piece = parseScore('3/0q 3/2q 2/1q 2/3q | 1/0w | 1/3h 1/0h', { title: 'Two herons' })
const quarter = (id: string, fret: number) => ({ id, length: { base: 4, dots: 0 } as const, notes: [{ id: `${id}n`, string: 2, fret }] })

/** String 1 first. */
const strung = (pitches: string): OpenString[] => pitches.split(' ').map(pitch => ({ pitch }))

/** An edit that fits `score`: the lower voice of its second bar gets one quarter. */
const lower = (score: Score, fret: number): Edit => ({
  kind: 'replaceVoice', bar: score.bars[1]!.id, voice: 'lower', before: score.bars[1]!.voices.lower ?? null, after: { events: [quarter(`x${fret}`, fret)] },
})

const databases = [
  { name: 'the embedded database', there: true, open: memoryDatabase },
  {
    name: 'a PostgreSQL server', there: hasPostgres, open: async () => {
      postgres = startPostgres(PORT)
      const handle = await openDb({ url: postgres.url })
      await prepare(handle, migrations)
      return handle
    },
  },
]

describe.each(databases)('on $name', ({ there, open }) => {
  describe.skipIf(!there)('', () => {
    let handle: DbHandle
    let author: string
    let other: string
    let count = 0
    const db = () => handle.db
    const person = async () => (await db().insert(users).values({ name: 'P', email: `p${count++}@example.com`, passwordHash: 'x', confirmedAt: new Date() }).returning())[0]!.id
    const save = (arrangementId: string, seq: number, base: number, edits: readonly Edit[], clientId = 'tab-1'): Save =>
      ({ arrangementId, authorId: author, clientId, seq, base, transactions: [{ label: 'Edit', edits }] })

    beforeAll(async () => {
      handle = await open()
      author = await person()
      other = await person()
    })
    afterAll(async () => {
      await handle.close()
      postgres?.stop()
      postgres = undefined
    })

    describe('the log', () => {
      it('keeps what is saved, numbered without gaps, and gives it back', async () => {
        const id = await createArrangement(db(), author, piece)
        let score = piece
        for (const fret of [1, 2, 3]) {
          const edit = lower(score, fret)
          expect(await saveEdits(db(), save(id, fret, fret - 1, [edit]))).toEqual({ kind: 'saved', revision: fret, repeated: false })
          const applied = applyEdits(score, [edit])
          if (!isRefused(applied)) score = applied.score
        }
        expect(await readArrangement(db(), id)).toEqual({ id, state: 'draft', revision: 3, score })
        const { revision, batches } = await editsSince(db(), id, 1)
        expect([revision, batches.map(each => each.revision)]).toEqual([3, [2, 3]])
        expect(await editsSince(db(), id, 3)).toEqual({ revision: 3, batches: [] })
      })

      it('answers a repeated save as it did the first time and does not apply it twice', async () => {
        const id = await createArrangement(db(), author, piece)
        const first = save(id, 7, 0, [lower(piece, 5)])
        await saveEdits(db(), first)
        await saveEdits(db(), save(id, 8, 1, [{ kind: 'patchHead', before: { title: 'Two herons' }, after: { title: 'Three herons' } }]))
        expect(await saveEdits(db(), first)).toEqual({ kind: 'saved', revision: 1, repeated: true })
        expect(await saveEdits(db(), { ...first, base: 2 }), 'on the newest base as well').toEqual({ kind: 'saved', revision: 1, repeated: true })
        expect((await readArrangement(db(), id)).revision).toBe(2)
      })

      it('does not pass in silence over other edits under a number that was used', async () => {
        const id = await createArrangement(db(), author, piece)
        await saveEdits(db(), save(id, 1, 0, [lower(piece, 5)]))
        expect(await saveEdits(db(), save(id, 1, 0, [lower(piece, 6)]))).toMatchObject({ kind: 'refused' })
        const { score } = await readArrangement(db(), id)
        expect(await saveEdits(db(), save(id, 1, 1, [lower(score, 6)])), 'on the newest base as well').toMatchObject({ kind: 'refused' })
        expect((await readArrangement(db(), id)).revision).toBe(1)
      })

      it('lets one of many saves at once through and tells the others what they missed', async () => {
        const id = await createArrangement(db(), author, piece)
        const results = await Promise.all(Array.from({ length: 6 }, (_, index) => saveEdits(db(), save(id, 1, 0, [lower(piece, index)], `tab-${index}`))))
        expect(results.filter(each => each.kind === 'saved')).toHaveLength(1)
        const winner = (await editsSince(db(), id, 0)).batches
        expect(winner).toHaveLength(1)
        for (const result of results.filter(each => each.kind !== 'saved')) expect(result).toEqual({ kind: 'stale', revision: 1, missed: winner })
      })

      it('lets the same save through once, however often it comes at once', async () => {
        const id = await createArrangement(db(), author, piece)
        const results = await Promise.all(Array.from({ length: 5 }, () => saveEdits(db(), save(id, 1, 0, [lower(piece, 4)]))))
        expect(results.map(each => each.kind === 'saved' && each.revision)).toEqual([1, 1, 1, 1, 1])
        expect((await editsSince(db(), id, 0)).batches).toHaveLength(1)
      })

      it('refuses edits that do not fit, all or none, and says why', async () => {
        const id = await createArrangement(db(), author, piece)
        const impossible: Edit = { ...lower(piece, 1), kind: 'replaceVoice', after: { events: [quarter('y', 30)] } } as Edit
        const results = [
          await saveEdits(db(), save(id, 1, 0, [{ kind: 'patchHead', before: { title: 'Two herons' }, after: { title: 'No herons' } }, impossible])),
          await saveEdits(db(), save(id, 2, 0, [{ ...lower(piece, 1), bar: 'nowhere' } as Edit])),
        ]
        expect(results).toEqual([
          { kind: 'refused', message: 'Bar 2: string 2 has no fret 30 on this neck.' },
          { kind: 'refused', message: 'That bar is not in the arrangement any more.' },
        ])
        expect((await readArrangement(db(), id)).score).toEqual(piece)
      })

      it('keeps the folio’s row in step', async () => {
        const id = await createArrangement(db(), author, piece)
        const strings = ['D4', 'A3', 'G3', 'D3', 'G2', 'C2'].map(pitch => ({ pitch }))
        await saveEdits(db(), save(id, 1, 0, [
          { kind: 'patchHead', before: { title: 'Two herons', strings: piece.head.strings, capos: [] }, after: { title: 'Herons', strings, capos: [{ fret: 2 }] } },
          { kind: 'insertBars', after: null, bars: [{ id: 'new-bar', voices: {} }] },
        ]))
        expect((await listArrangements(db(), author)).find(each => each.id === id)).toMatchObject({ title: 'Herons', strings, capos: [{ fret: 2 }], bars: 4, role: 'arranger', state: 'draft' })
      })

      it('takes snapshots on the way and opens from the nearest one', async () => {
        const id = await createArrangement(db(), author, piece)
        let score = piece
        for (let seq = 1; seq <= SNAPSHOT_EVERY + 2; seq++) {
          const edit = lower(score, seq % 12)
          expect((await saveEdits(db(), save(id, seq, seq - 1, [edit]))).kind).toBe('saved')
          const applied = applyEdits(score, [edit])
          if (!isRefused(applied)) score = applied.score
        }
        await finishLater()
        const taken = await db().select({ revision: snapshots.revision }).from(snapshots).where(eq(snapshots.arrangementId, id))
        expect(taken.map(each => each.revision).sort((a, b) => a - b)).toEqual([0, SNAPSHOT_EVERY])
        expect((await readArrangement(db(), id)).score).toEqual(score)
      })

      it('is right when another instance saved meanwhile', async () => {
        const id = await createArrangement(db(), author, piece)
        await saveEdits(db(), save(id, 1, 0, [lower(piece, 1)]))
        const before = (await readArrangement(db(), id)).score
        // Another instance writes to the tables, past this process's cache.
        const edit = lower(before, 9)
        await db().insert(revisions).values({ arrangementId: id, revision: 2, clientId: 'elsewhere', seq: 1, transactions: [{ label: 'Edit', edits: [edit] }] })
        await db().update(arrangements).set({ revision: 2 }).where(eq(arrangements.id, id))
        expect((await readArrangement(db(), id)).score.bars[1]!.voices.lower!.events[0]!.notes[0]!.fret).toBe(9)
        expect(await saveEdits(db(), save(id, 2, 1, [lower(before, 3)]))).toMatchObject({ kind: 'stale', revision: 2, missed: [{ revision: 2, clientId: 'elsewhere' }] })
      })

      it('replays to the same score whatever is saved, in any order of tabs (random)', async () => {
        const step = fc.record({ tab: fc.integer({ min: 0, max: 2 }), fret: fc.integer({ min: 0, max: 12 }), old: fc.boolean(), again: fc.boolean() })
        await fc.assert(fc.asyncProperty(fc.array(step, { minLength: 1, maxLength: 12 }), async (steps) => {
          const id = await createArrangement(db(), author, piece)
          let score = piece
          let revision = 0
          for (const [index, { tab, fret, old, again }] of steps.entries()) {
            const edit = lower(score, fret)
            const request = save(id, index + 1, old ? Math.max(0, revision - 1) : revision, [edit], `tab-${tab}`)
            const result = await saveEdits(db(), request)
            if (old && revision > 0) {
              expect(result).toMatchObject({ kind: 'stale', revision })
              continue
            }
            revision += 1
            expect(result).toMatchObject({ kind: 'saved', revision })
            const applied = applyEdits(score, [edit])
            if (!isRefused(applied)) score = applied.score
            if (again) expect(await saveEdits(db(), request)).toEqual({ kind: 'saved', revision, repeated: true })
          }
          expect(await readArrangement(db(), id)).toMatchObject({ revision, score })
          const { batches } = await editsSince(db(), id, 0)
          const replayed = applyEdits(piece, batches.flatMap(batch => batch.transactions.flatMap(each => each.edits)))
          expect(isRefused(replayed) ? replayed : replayed.score).toEqual(score)
        }), { numRuns: 15 })
      })

      it('renames through the log', async () => {
        const id = await createArrangement(db(), author, piece)
        expect(await rename(db(), author, id, 'One heron')).toMatchObject({ kind: 'saved', revision: 1 })
        expect(await rename(db(), author, id, 'One heron')).toMatchObject({ kind: 'saved', revision: 1 })
        expect((await editsSince(db(), id, 0)).batches.map(each => each.transactions)).toEqual([
          [{ label: 'Rename', edits: [{ kind: 'patchHead', before: { title: 'Two herons' }, after: { title: 'One heron' } }] }],
        ])
      })

      it('keeps text of every script, and refuses none of it', async () => {
        const title = 'Ⅻ “Öz” 𝄞 — אב 日本\u200D'
        const id = await createArrangement(db(), author, { ...piece, head: { ...piece.head, title } })
        expect((await readArrangement(db(), id)).score.head.title).toBe(title)
      })
    })

    describe('arrangements', () => {
      it('are seen by their people only', async () => {
        const id = await createArrangement(db(), author, piece)
        expect(await roleIn(db(), author, id)).toBe('arranger')
        expect(await roleIn(db(), other, id)).toBeNull()
        expect(await roleIn(db(), other, 'no-uuid; drop table users')).toBeNull()
        expect((await listArrangements(db(), other)).some(each => each.id === id)).toBe(false)
        await db().insert(members).values({ arrangementId: id, userId: other, role: 'performer' })
        expect((await listArrangements(db(), other)).find(each => each.id === id)?.role).toBe('performer')
      })

      it('come back as they were after deleting', async () => {
        const id = await createArrangement(db(), author, piece)
        await saveEdits(db(), save(id, 1, 0, [lower(piece, 2)]))
        const before = await readArrangement(db(), id)
        await deleteArrangement(db(), id)
        expect([await roleIn(db(), author, id), await roleIn(db(), author, id, true)]).toEqual([null, 'arranger'])
        expect((await listArrangements(db(), author)).some(each => each.id === id)).toBe(false)
        await restoreArrangement(db(), id)
        expect(await readArrangement(db(), id)).toEqual(before)
      })

      it('are duplicated with a history of their own', async () => {
        const id = await createArrangement(db(), author, piece)
        const copy = await duplicateArrangement(db(), other, id)
        expect(await readArrangement(db(), copy)).toMatchObject({ revision: 0, score: { head: { title: 'Two herons (copy)' }, bars: piece.bars } })
        await saveEdits(db(), save(copy, 1, 0, [lower(piece, 2)]))
        expect((await readArrangement(db(), id)).score).toEqual(piece)
        expect(await roleIn(db(), author, copy)).toBeNull()
      })

      it('are duplicated whatever their title, which is cut between characters', async () => {
        const title = `${'x'.repeat(189)}𝄞${'y'.repeat(9)}`
        const id = await createArrangement(db(), author, { ...piece, head: { ...piece.head, title } })
        const { score } = await readArrangement(db(), await duplicateArrangement(db(), author, id))
        expect(score.head.title).toBe(`${'x'.repeat(189)} (copy)`)
      })
    })

    describe('tunings of one’s own', () => {
      const low = strung('D4 B3 G3 D3 G2 D2')

      it('are kept with name and notes, listed by name, changed and taken back', async () => {
        const owner = await person()
        const second = (await createTuning(db(), owner, { name: 'weir', strings: low }))!
        const first = (await createTuning(db(), owner, { name: 'Reed bed', notes: 'For the slow airs.', strings: strung('D4 A3 F#3 D3 A2 D2') }))!
        expect((await listTunings(db(), owner)).map(({ name, notes, strings }) => [name, notes, strings.length])).toEqual([['Reed bed', 'For the slow airs.', 6], ['weir', '', 6]])
        const [before] = await listTunings(db(), owner)
        expect(await patchTuning(db(), owner, first, { notes: '' })).toBe(true)
        const [after] = await listTunings(db(), owner)
        expect(after).toMatchObject({ id: first, name: 'Reed bed', notes: '', strings: before!.strings })
        expect(Date.parse(after!.changedAt)).toBeGreaterThanOrEqual(Date.parse(before!.changedAt))
        expect(await deleteTuning(db(), owner, first)).toBe(true)
        expect((await listTunings(db(), owner)).map(each => each.id)).toEqual([second])
        expect(await patchTuning(db(), owner, first, { name: 'gone' }), 'a deleted one can’t be changed').toBe(false)
        expect(await restoreTuning(db(), owner, first)).toBe('restored')
        expect(await restoreTuning(db(), owner, first), 'bringing it back twice is once').toBe('restored')
        expect((await listTunings(db(), owner))[0]).toEqual(after)
      })

      it('are nobody else’s to see or change', async () => {
        const owner = await person()
        const id = (await createTuning(db(), owner, { name: 'Mine', strings: low }))!
        expect(await listTunings(db(), other)).toEqual([])
        expect([await patchTuning(db(), other, id, { name: 'Theirs' }), await deleteTuning(db(), other, id), await restoreTuning(db(), other, id)]).toEqual([false, false, 'absent'])
        expect([await patchTuning(db(), owner, 'nonsense', { name: 'x' }), await restoreTuning(db(), owner, 'nonsense')]).toEqual([false, 'absent'])
        expect((await listTunings(db(), owner))[0]).toMatchObject({ id, name: 'Mine' })
      })

      it('have an upper limit, also when two come at once and when one comes back', async () => {
        const owner = await person()
        for (let index = 0; index < OWN_TUNINGS.most - 1; index++) await createTuning(db(), owner, { name: `Tuning ${index}`, strings: low })
        const [kept] = await listTunings(db(), owner)
        const both = await Promise.all([createTuning(db(), owner, { name: 'One', strings: low }), createTuning(db(), owner, { name: 'Other', strings: low })])
        expect(both.filter(id => id === null)).toHaveLength(1)
        await deleteTuning(db(), owner, kept!.id)
        expect(await createTuning(db(), owner, { name: 'In its place', strings: low })).not.toBeNull()
        expect(await restoreTuning(db(), owner, kept!.id)).toBe('full')
        expect(await listTunings(db(), owner)).toHaveLength(OWN_TUNINGS.most)
      })

      it('are shown with an arrangement that is in them, however they are spelled, and with no other', async () => {
        const [arranger, performer] = [await person(), await person()]
        const id = await createArrangement(db(), arranger, { ...piece, head: { ...piece.head, strings: strung('D4 A3 Gb3 D3 A2 D2') } })
        await db().insert(members).values({ arrangementId: id, userId: performer, role: 'performer' })
        expect(await tuningNames(db(), id)).toEqual([])
        const tuning = (await createTuning(db(), arranger, { name: 'Reed bed', notes: 'Third string up last.', strings: strung('D4 A3 F#3 D3 A2 D2') }))!
        await createTuning(db(), arranger, { name: 'Another', strings: low })
        await createTuning(db(), performer, { name: 'A reader’s own name', strings: strung('D4 A3 F#3 D3 A2 D2') })
        expect(await tuningNames(db(), id)).toEqual([{ name: 'Reed bed', notes: 'Third string up last.', by: 'P' }])
        await deleteTuning(db(), arranger, tuning)
        expect(await tuningNames(db(), id)).toEqual([])
      })
    })

    describe('accounts', () => {
      it('exist once confirmed, with the password of the link that was used', async () => {
        const email = 'elin@example.com'
        const mine = await register(db(), { name: 'Elin', email, passwordHash: 'mine' })
        const theirs = await register(db(), { name: 'Mallory', email, passwordHash: 'theirs' })
        expect((await userByEmail(db(), email))!.confirmedAt).toBeNull()
        expect(await confirm(db(), mine!.token)).toMatchObject({ name: 'Elin', passwordHash: 'mine' })
        expect(await confirm(db(), theirs!.token), 'the other link died with the first use').toBeNull()
        expect(await confirm(db(), mine!.token), 'a link works once').toBeNull()
        expect(await register(db(), { name: 'Mallory', email, passwordHash: 'theirs' }), 'a confirmed account stays as it is').toBeNull()
        expect(await userByEmail(db(), email)).toMatchObject({ name: 'Elin', passwordHash: 'mine' })
      })

      it('let a token be used by one of two requests at once, never of another kind, never too late', async () => {
        const token = await makeToken(db(), author, 'reset')
        expect(await useToken(db(), 'confirm', token)).toBeNull()
        const both = await Promise.all([useToken(db(), 'reset', token), useToken(db(), 'reset', token)])
        expect(both.filter(each => each !== null)).toHaveLength(1)
        const late = await makeToken(db(), author, 'reset')
        await db().update(tokens).set({ expiresAt: new Date(Date.now() - 1000) }).where(and(eq(tokens.userId, author), eq(tokens.kind, 'reset')))
        expect(await useToken(db(), 'reset', late)).toBeNull()
      })

      it('keep no token in the clear', async () => {
        const token = await makeToken(db(), author, 'confirm')
        const rows = await db().select().from(tokens)
        expect(JSON.stringify(rows)).not.toContain(token)
        // SHA-256, FIPS 180-4, in hexadecimal.
        expect(rows.every(row => /^[\da-f]{64}$/.test(row.hash))).toBe(true)
      })

      it('end sessions when the password changes', async () => {
        const [here, there] = [await openSession(db(), other), await openSession(db(), other)]
        await changePassword(db(), other, 'new', here)
        expect([(await sessionOwner(db(), here))?.id, await sessionOwner(db(), there)]).toEqual([other, null])
        await resetPassword(db(), await makeToken(db(), other, 'reset'), 'newer')
        expect(await sessionOwner(db(), here)).toBeNull()
      })
    })

    it('lays the demo out once; what people did with it stays', async () => {
      const hash = async (password: string) => `hashed ${password}`
      await layOutDemo(db(), hash)
      const maren = (await userByEmail(db(), DEMO_PEOPLE.maren.email))!
      const found = await listArrangements(db(), maren.id)
      expect(found.map(each => each.title).sort()).toEqual(['Gulls over Hay Fen', 'Low Water', 'The Saltmarsh Road'])
      expect(found[0]!.title).toBe('The Saltmarsh Road')
      await deleteArrangement(db(), found[0]!.id)
      await layOutDemo(db(), hash)
      expect((await listArrangements(db(), maren.id)).map(each => each.title).sort()).toEqual(['Gulls over Hay Fen', 'Low Water'])
    })
  })
})
