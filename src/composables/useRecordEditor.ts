import { computed, onBeforeUnmount, onMounted, ref, shallowRef, watch } from 'vue'
import type { Ref } from 'vue'
import { ApiProblem } from '../api/request.ts'
import type { VersionedRecord } from '../api/fleet.ts'
import { makeId } from '../api/makeId.ts'
import { draftPlace, dropDraft, readDraft, writeDraft } from '../stores/drafts.ts'
import type { Draft, DraftKind, Edit } from '../stores/drafts.ts'
import { useSessionStore } from '../stores/session.ts'
import { findDifferences, mergeRecords } from './recordDifferences.ts'
import type { FieldDifference, Side } from './recordDifferences.ts'

const keepAfterMs = 300

export interface RecordCalls<Profile, Kept extends VersionedRecord> {
  create: (id: string, profile: Profile) => Promise<Kept>
  change: (record: VersionedRecord, profile: Profile) => Promise<Kept>
}

export interface EditorKind<Profile extends object, Kept extends Profile & VersionedRecord> {
  kind: DraftKind
  calls: RecordCalls<Profile, Kept>
  /** what an editor of a new record begins with */
  start: () => Edit
  editOf: (record: Profile) => Edit
  /** null while a field cannot be read */
  profileOf: (edit: Edit) => Profile | null
  /** a record's own fields, without what the server keeps beside them */
  profileOfRecord: (record: Kept) => Profile
  /** what has to be saved before it, such as a compressor that is new with it */
  prepare?: (edit: Edit) => Promise<void>
  /** the newest of this id, where the same one has been saved already */
  find: (id: string) => Promise<Kept | null>
  onSaved: (record: Kept) => void
  /** whether a draft that was left here belongs to what is edited now */
  accepts?: (draft: Draft) => boolean
}

export interface Conflict<Kept> {
  stored: Kept
  differences: FieldDifference[]
}

/**
 * One record in its editor: what is typed is kept on this device until it is saved, and where somebody else has saved
 * meanwhile nothing of either is lost.
 */
export function useRecordEditor<Profile extends object, Kept extends Profile & VersionedRecord>(
  record: Ref<Kept | null>,
  id: string | null,
  kind: EditorKind<Profile, Kept>,
) {
  const store = useSessionStore()
  const place = draftPlace(store.session, kind.kind, id)
  const copy = <T>(value: T): T => JSON.parse(JSON.stringify(value)) as T

  /** the record as it was when the editing began */
  const base = shallowRef<Kept | null>(record.value)
  const beginning = (): Edit => (base.value ? kind.editOf(base.value) : kind.start())
  const edit = ref(beginning()) as Ref<Edit>
  const unchanged = ref(JSON.stringify(edit.value))
  const isChanged = computed(() => JSON.stringify(edit.value) !== unchanged.value)
  /** when the draft that was found here had been left */
  const restoredAt = ref<string | null>(null)
  const refusal = shallowRef<ApiProblem | null>(null)
  const conflict = shallowRef<Conflict<Kept> | null>(null)
  const isSaving = ref(false)
  const newId = ref(makeId())
  let isDone = false
  let pause: ReturnType<typeof setTimeout> | undefined

  function begin(next: Kept | null) {
    base.value = next
    edit.value = beginning()
    unchanged.value = JSON.stringify(edit.value)
  }

  const draft = readDraft(place)
  if (draft && (kind.accepts?.(draft) ?? true)) {
    edit.value = draft.edit
    restoredAt.value = draft.savedAt
    if (draft.base && base.value) {
      base.value = draft.base as Kept
      unchanged.value = JSON.stringify(kind.editOf(base.value))
    } else if (draft.base) newId.value = draft.base.id
  }

  function keepDraft() {
    clearTimeout(pause)
    if (isDone) return
    if (!isChanged.value) return dropDraft(place)
    // of a new record its id alone: sent twice it is still one
    const kept = base.value ?? { id: newId.value, version: 0 }
    writeDraft(place, { edit: copy(edit.value), base: kept, savedAt: new Date().toISOString() })
  }

  watch(
    edit,
    () => {
      clearTimeout(pause)
      pause = setTimeout(keepDraft, keepAfterMs)
    },
    { deep: true },
  )
  /** Somebody else's newer one is taken as it is where nothing has been typed over it. */
  watch(record, (next) => {
    if (next && !isChanged.value && !isSaving.value && next.version !== base.value?.version) begin(next)
  })
  onMounted(() => addEventListener('pagehide', keepDraft))
  onBeforeUnmount(() => {
    removeEventListener('pagehide', keepDraft)
    keepDraft()
  })

  function discard() {
    dropDraft(place)
    restoredAt.value = null
    refusal.value = null
    conflict.value = null
    begin(record.value ?? base.value)
  }

  /** Leaves it as it stands on the server: nothing is kept on the way out. */
  function abandon() {
    isDone = true
    clearTimeout(pause)
    dropDraft(place)
  }

  async function send(profile: Profile): Promise<Kept> {
    if (base.value) return kind.calls.change(base.value, profile)
    try {
      return await kind.calls.create(newId.value, profile)
    } catch (error) {
      if (!(error instanceof ApiProblem) || error.code !== 'id-in-use') throw error
      // an attempt whose answer was lost had been written after all, and more was typed since
      const saved = await kind.find(newId.value)
      if (!saved) throw error
      return kind.calls.change(saved, profile)
    }
  }

  function refuse(error: unknown, mine: Profile) {
    refusal.value = error instanceof ApiProblem ? error : new ApiProblem('internal-error', null)
    if (!(error instanceof ApiProblem)) console.error(error)
    const stored = refusal.value.problem?.stored as Kept | undefined
    if (refusal.value.code !== 'version-conflict' || !stored) return
    const began = base.value ?? stored
    const theirs = kind.profileOfRecord(stored)
    const differences = findDifferences(kind.profileOfRecord(began), mine, theirs)
    conflict.value = { stored, differences }
  }

  /** The saved record, or null where it was refused or cannot be read yet. */
  async function save(): Promise<Kept | null> {
    if (isSaving.value || kind.profileOf(edit.value) === null) return null
    isSaving.value = true
    refusal.value = null
    try {
      await kind.prepare?.(edit.value)
      const profile = kind.profileOf(edit.value)
      if (profile === null) return null
      try {
        const saved = await send(profile)
        abandon()
        unchanged.value = JSON.stringify(edit.value)
        kind.onSaved(saved)
        return saved
      } catch (error) {
        refuse(error, profile)
        return null
      }
    } catch (error) {
      refusal.value = error instanceof ApiProblem ? error : new ApiProblem('internal-error', null)
      return null
    } finally {
      isSaving.value = false
      if (!isDone) keepDraft()
    }
  }

  /** Both people's work as it was chosen, on top of what is stored; saved at once. */
  async function settle(choices: Record<string, Side>): Promise<Kept | null> {
    const found = conflict.value
    const mine = kind.profileOf(edit.value)
    if (!found || mine === null) return null
    const theirs = kind.profileOfRecord(found.stored)
    conflict.value = null
    base.value = found.stored
    edit.value = kind.editOf(mergeRecords(mine, theirs, choices))
    unchanged.value = JSON.stringify(kind.editOf(theirs))
    return save()
  }

  return {
    edit,
    base,
    isChanged,
    restoredAt,
    refusal,
    conflict,
    isSaving,
    newId,
    discard,
    abandon,
    keepDraft,
    save,
    settle,
  }
}
