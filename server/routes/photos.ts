import { z } from 'zod'
import { idSchema } from '#shared/contracts/records.ts'
import { photoQuerySchema, photoSchema } from '#shared/contracts/work.ts'
import { defineRoute } from '../routing/route.ts'
import { addPhoto, findPhotoFile } from '../services/photos.ts'
import { photoTypes, readPhoto } from '../uploads/readPhoto.ts'

export const photoRoutes = [
  defineRoute({
    method: 'post',
    path: '/api/v1/photos',
    access: 'log-work',
    operationId: 'addPhoto',
    summary: 'A photo, kept as a JPEG without place, time and camera; the same one sent twice is one',
    query: photoQuerySchema,
    upload: { types: photoTypes, read: readPhoto },
    status: 201,
    answer: photoSchema,
    problems: ['bad-request', 'id-in-use', 'too-many-records', 'busy', 'storage-unavailable'],
    handle: ({ context, caller, query: { id }, request }) =>
      addPhoto(context, caller, id, request.body as Buffer),
  }),
  defineRoute({
    method: 'get',
    path: '/api/v1/photos/:photoId',
    access: 'see-rigs',
    operationId: 'readPhoto',
    summary: 'A photo of the company',
    params: z.strictObject({ photoId: idSchema }),
    file: 'image/jpeg',
    handle: async ({ context, caller, params: { photoId }, response }) => {
      const { root, fileName } = findPhotoFile(context, caller, photoId)
      response.type('image/jpeg')
      // It never changes, but who may see it does: each time it is asked for, and sent only once.
      response.set('Cache-Control', 'private, no-cache')
      response.set('ETag', `"${photoId}"`)
      await new Promise<void>((resolve, reject) => {
        response.sendFile(
          fileName,
          { root, cacheControl: false },
          (error: (Error & { code?: string }) | undefined) => {
            // Whoever goes away before the end has no answer coming.
            if (error && !response.headersSent && error.code !== 'ECONNABORTED') reject(error)
            else resolve()
          },
        )
      })
    },
  }),
]
