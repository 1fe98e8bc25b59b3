import { Readable } from 'node:stream'
import { buffer } from 'node:stream/consumers'
import { ZipArchive } from 'archiver'
import { may } from '#shared/contracts/permissions.ts'
import type { Actor } from '../actor.ts'
import { describeTable, writeTable } from '../tables/exportTable.ts'
import type { ExportTable } from '../tables/exportTable.ts'
import { writeAudit } from './audit.ts'
import { findAuditEnd, writeAuditCsv } from './auditLog.ts'
import { compressorKind } from './compressors.ts'
import {
  makeCompanyTable,
  makeCompressorTable,
  makeOutletTable,
  makePeopleTable,
  makeRigTable,
  makeSiteTable,
  makeTodayTable,
} from './exportTables.ts'
import type { Names } from './exportTables.ts'
import {
  makeBoreCheckTable,
  makeEventTable,
  makeGaugeTable,
  makeMediaTable,
  makeNozzleTable,
  makeShiftTable,
} from './exportWorkTables.ts'
import { listRecords } from './records.ts'
import type { Context } from './records.ts'
import { rigKind } from './rigs.ts'
import { siteKind } from './sites.ts'
import { readWork } from './work.ts'

const introduction = [
  'The company’s data, as it was at one moment.',
  '',
  'Every file is CSV in UTF-8 with a comma between. Pressures are gauge. A heading ends with its unit where it has one:',
  'kpa kPa, m3_min m³ of free air a minute, m m, mm mm, kg_h kg/h, l_h L/h, l_min L/min, l L.',
  'compressors.csv and rigs.csv can be imported again, and so can any file with their headings. There a cell may say its',
  'own unit (375 cfm, 100 psi, 1 1/4 in, No. 6), and a heading may end with another: free_air_cfm, set_pressure_psi,',
  'hose_length_ft, nozzle_number. A text that a spreadsheet would run as a formula begins with an apostrophe.',
  'What is deleted is not in here. Photos are not in here either.',
  '',
  '',
].join('\r\n')

function nameBy(records: { id: string; name: string }[]): (id: string | null) => string | null {
  const names = new Map(records.map(({ id, name }) => [id, name]))
  return (id) => (id === null ? null : (names.get(id) ?? id))
}

interface ZippedFile {
  name: string
  content: string | Readable
}

/** Every file of the export, all of one moment, and the note that it was made. */
function readFiles({ database, now }: Context, actor: Actor): ZippedFile[] {
  const { companyId, roles } = actor
  return database.transact((writer) => {
    const compressors = listRecords(compressorKind, database, actor)
    const sites = listRecords(siteKind, database, actor)
    const rigs = listRecords(rigKind, database, actor)
    const { nozzles, media, events, shifts, boreChecks, gaugeReadings } = readWork({ database }, actor)
    const names: Names = {
      compressor: nameBy(compressors),
      site: nameBy(sites),
      rig: nameBy(rigs),
      nozzle: nameBy(nozzles),
      medium: nameBy(media),
    }
    const files: ZippedFile[] = []
    const about: string[] = [introduction]
    const add = <Row>(table: ExportTable<Row>) => {
      const { name, text } = writeTable(table, roles)
      files.push({ name, content: text })
      about.push(describeTable(table, roles))
    }
    add(makeCompanyTable(database, companyId))
    add(makePeopleTable(database, companyId))
    add(makeCompressorTable(compressors))
    add(makeSiteTable(sites))
    add(makeRigTable(rigs, names))
    add(makeOutletTable(rigs))
    add(makeTodayTable(database, companyId, names))
    add(makeNozzleTable(nozzles, names))
    add(makeEventTable(events, names))
    add(makeMediaTable(media))
    add(makeShiftTable(shifts, names))
    add(makeBoreCheckTable(boreChecks, names))
    add(makeGaugeTable(gaugeReadings, names))
    if (may(roles, 'read-audit')) {
      // It may be long, and is never changed: it is read while the others' requests go on.
      const log = writeAuditCsv(database, actor, {}, findAuditEnd(database, actor))
      files.push({ name: 'audit.csv', content: Readable.from(log) })
      about.push('audit.csv\r\n  Who did what, when (UTC); changes as JSON, from what to what.\r\n')
    }
    files.push({ name: 'readme.txt', content: `\ufeff${about.join('\r\n')}` })
    writeAudit(writer, actor, now(), {
      action: 'data.exported',
      subject: files.map(({ name }) => name).join(' '),
    })
    return files
  })
}

/** The company’s data as a ZIP. */
export async function exportData(context: Context, actor: Actor): Promise<Buffer> {
  const files = readFiles(context, actor)
  const archive = new ZipArchive({ zlib: { level: 6 } })
  for (const { name, content } of files) archive.append(content, { name, date: context.now() })
  const [zip] = await Promise.all([buffer(archive), archive.finalize()])
  return zip
}
