import { defineRoute } from '../routing/route.ts'
import { exportData } from '../services/exports.ts'

export const exportRoutes = [
  defineRoute({
    method: 'get',
    path: '/api/v1/export.zip',
    access: 'export-data',
    operationId: 'exportData',
    summary: 'The company’s data as CSV files with a readme of their columns and units',
    file: 'application/zip',
    handle: async ({ context, caller, response }) => {
      const zip = await exportData(context, caller)
      const day = context.now().toISOString().slice(0, 10)
      response.attachment(`sixteenth-data-${day}.zip`).type('application/zip').send(zip)
    },
  }),
]
