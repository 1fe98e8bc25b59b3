import { computed, ref, toRef } from 'vue'
import type { CompressorProfile } from '#shared/contracts/compressors.ts'
import type { Fleet, RigProfile, RigRecord } from '#shared/contracts/rigs.ts'
import type { SiteProfile } from '#shared/contracts/sites.ts'
import { createCheckForm } from '#shared/form/checkForm.ts'
import { readFragment } from '#shared/form/fragment.ts'
import { putCompressor, putSite, readCompressorParts, readSiteParts } from '#shared/form/profiles.ts'
import { readForm } from '#shared/form/readForm.ts'
import { ApiProblem } from '../../api/request.ts'
import { compressorCalls } from '../../api/compressors.ts'
import { makeId } from '../../api/makeId.ts'
import { rigCalls } from '../../api/rigs.ts'
import { siteCalls } from '../../api/sites.ts'
import { useFieldWords } from '../../composables/useFieldWords.ts'
import type { RecordCalls } from '../../composables/useRecordEditor.ts'
import { useRecordEditor } from '../../composables/useRecordEditor.ts'
import { useWords } from '../../composables/useWords.ts'
import { findInFleet, useFleet } from '../../queries/fleet.ts'
import type { FleetList } from '../../queries/fleet.ts'
import { dropHeldCheck } from '../../stores/heldCheck.ts'
import type { Edit } from '../../stores/drafts.ts'
import { usePreferencesStore } from '../../stores/preferences.ts'
import { useSessionStore } from '../../stores/session.ts'
import {
  compressorOfEdit,
  editOfRig,
  findSame,
  freeName,
  newChoice,
  profileOfRig,
  rigOfEdit,
  siteOfEdit,
} from './rigEdit.ts'

/** What a new rig begins as: a blank one, a copy, or a check that was open. */
export interface RigStart {
  copy: RigRecord | null
  /** the fragment of the check */
  check: string | null
}

/** The editor of one rig, with the compressor and the site that are saved with it. */
export function useRigEditor(props: { fleet: Fleet; rig: RigRecord | null; start: RigStart }) {
  const { t, quantity } = useWords()
  const { typedValue } = useFieldWords()
  const preferences = usePreferencesStore()
  const session = useSessionStore()
  const { keep, refetch } = useFleet()
  const { start } = props
  /** whose name the server refused */
  const refusedPart = ref<'rig' | 'compressor' | 'site'>('rig')
  const system = () => preferences.units
  const fleet = computed(() => props.fleet)

  function suggestCompressor(parts: Pick<CompressorProfile, 'ratedFreeAirM3Min' | 'setPressureKpa'>): string {
    const air = typedValue('volumeFlow', parts.ratedFreeAirM3Min)
    const name = t('kit.compressors.suggested', {
      air,
      pressure: typedValue('pressure', parts.setPressureKpa),
    })
    return freeName(name, fleet.value.compressors)
  }

  const suggestSite = ({ altitudeM }: Pick<SiteProfile, 'altitudeM'>) =>
    freeName(t('kit.sites.suggested', { altitude: quantity('altitude', altitudeM) }), fleet.value.sites)

  function editOfCheck(fragment: string): Edit {
    const { form } = readFragment(fragment)
    const { values, request } = readForm(form)
    const fields: Edit['fields'] = {
      name: freeName(t('kit.rigs.suggested'), fleet.value.rigs),
      compressorId: newChoice,
      siteId: newChoice,
      compressorName: '',
      siteName: '',
      newCompressorId: makeId(),
      newSiteId: makeId(),
      check: fragment,
    }
    if (!request) return { form, fields }
    const compressor = readCompressorParts(form, values)
    const site = readSiteParts(values)
    fields.compressorId = findSame(fleet.value.compressors, compressor)?.id ?? newChoice
    fields.siteId = findSame(fleet.value.sites, site)?.id ?? newChoice
    fields.compressorName = suggestCompressor(compressor)
    fields.siteName = suggestSite(site)
    return { form, fields }
  }

  function startEdit(): Edit {
    if (start.check !== null) return editOfCheck(start.check)
    if (start.copy) {
      const { form, fields } = editOfRig(profileOfRig(start.copy), fleet.value, system())
      const name = freeName(t('kit.rigs.copyOf', { name: start.copy.name }), fleet.value.rigs)
      return { form, fields: { ...fields, name } }
    }
    const blank = editOfCheck('')
    const usable = <Kept extends { isArchived: boolean; id: string }>(records: Kept[]) =>
      records.find(({ isArchived }) => !isArchived)?.id ?? newChoice
    blank.form = createCheckForm()
    blank.form.outlets[0]!.boreNow = { text: '', system: 'us' }
    blank.fields.compressorId = usable(fleet.value.compressors)
    blank.fields.siteId = usable(fleet.value.sites)
    return blank
  }

  async function findNow<List extends FleetList>(list: List, id: string) {
    const { data } = await refetch(true)
    return findInFleet(data, list, id)
  }

  /** Made once, however often it is sent; a name that was mended in between is a change of it. */
  async function createOnce<Profile, Kept extends { id: string; version: number }>(
    calls: RecordCalls<Profile, Kept>,
    id: string,
    profile: Profile,
    find: () => Promise<Kept | null>,
  ): Promise<Kept> {
    try {
      return await calls.create(id, profile)
    } catch (error) {
      const saved = error instanceof ApiProblem && error.code === 'id-in-use' ? await find() : null
      if (!saved) throw error
      return calls.change(saved, profile)
    }
  }

  /** The compressor and the site that are new come first: the rig is hitched to them by their ids. */
  async function prepare(edit: Edit) {
    const { fields } = edit
    if (fields.compressorId === newChoice) {
      refusedPart.value = 'compressor'
      const id = (fields.newCompressorId ??= makeId())
      const profile = compressorOfEdit(edit, fleet.value, system())
      const saved = await createOnce(compressorCalls, id, profile, () => findNow('compressors', id))
      keep('compressors', saved)
      fields.compressorId = saved.id
      fields.newCompressorId = null
    }
    if (fields.siteId === newChoice) {
      refusedPart.value = 'site'
      const id = (fields.newSiteId ??= makeId())
      const timeZone = session.session?.company?.timeZone ?? 'UTC'
      const profile = siteOfEdit(edit, fleet.value, system(), timeZone)
      const saved = await createOnce(siteCalls, id, profile, () => findNow('sites', id))
      keep('sites', saved)
      fields.siteId = saved.id
      fields.newSiteId = null
    }
    refusedPart.value = 'rig'
  }

  const draftId =
    props.rig?.id ?? (start.check !== null ? 'check' : start.copy ? `copy-${start.copy.id}` : null)
  const editor = useRecordEditor<RigProfile, RigRecord>(
    toRef(() => props.rig),
    draftId,
    {
      kind: 'rig',
      calls: rigCalls,
      start: startEdit,
      editOf: (rig) => editOfRig(rig, fleet.value, system()),
      profileOf: (edit) => rigOfEdit(edit, fleet.value, system()),
      profileOfRecord: profileOfRig,
      prepare,
      find: (id) => findNow('rigs', id),
      onSaved: (rig) => {
        if (start.check !== null) dropHeldCheck()
        keep('rigs', rig)
        void refetch()
      },
      // another check that was left here is not the one that is to be saved now
      accepts: ({ edit }) => start.check === null || edit.fields.check === start.check,
    },
  )

  /** A new one starts as the chosen one stands, so that a difference is all there is to type. */
  function choose(part: 'compressorId' | 'siteId', choice: string) {
    const { edit } = editor
    const earlier = edit.value.fields[part] ?? null
    if (choice === newChoice && part === 'compressorId') {
      const record = findInFleet(fleet.value, 'compressors', earlier)
      if (record) edit.value.form = putCompressor(edit.value.form, record, system())
      else if (!edit.value.form.compressor.freeAir.text)
        edit.value.form.compressor = createCheckForm().compressor
      const parts = readCompressorParts(edit.value.form, readForm(edit.value.form).values)
      edit.value.fields.compressorName ||= suggestCompressor(parts)
    }
    if (choice === newChoice && part === 'siteId') {
      const record = findInFleet(fleet.value, 'sites', earlier)
      if (record) edit.value.form = putSite(edit.value.form, record, system())
      else if (!edit.value.form.site.altitude.text) edit.value.form.site = createCheckForm().site
      edit.value.fields.siteName ||= suggestSite(readSiteParts(readForm(edit.value.form).values))
    }
    edit.value.fields[part] = choice === '' ? null : choice
  }

  return { ...editor, refusedPart, choose }
}
