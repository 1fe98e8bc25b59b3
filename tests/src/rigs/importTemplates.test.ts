import { describe, expect, test } from 'vitest'
import { importTemplate } from '../../../src/components/fleet/importTemplates.ts'
import { findColumns } from '../../../server/tables/columns.ts'
import { compressorColumns } from '../../../server/tables/compressorColumns.ts'
import { rigColumns } from '../../../server/tables/rigColumns.ts'

const columns = { compressors: compressorColumns, rigs: rigColumns }

describe.each(['compressors', 'rigs'] as const)('the template for %s', (kind) => {
  test.each(['us', 'metric'] as const)('has headings and cells that an import reads, in %s', (system) => {
    const [head = '', row = ''] = importTemplate(kind, system).split('\r\n')
    const { found, errors } = findColumns(columns[kind], head.split(','))
    expect(errors).toEqual([])
    const cells = row.split(',')
    expect(cells).toHaveLength(found.length)
    const misread = found.filter((match, index) => {
      const text = cells[index]!
      return text !== '' && !match!.column.cell.read(text, match!.unit).ok
    })
    expect(misread.map((match) => match!.heading)).toEqual([])
  })
})
