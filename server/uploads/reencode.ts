import sharp from 'sharp'
import { workLimits } from '#shared/contracts/limits.ts'
import { makePassingProblem, makeProblem } from '../problems.ts'

const longestSidePx = 2000
const jpegQuality = 82
/** pictures worked on at once, and how many more may wait for their turn */
const mostAtOnce = 2
const mostWaiting = 12

// Whatever a file says of itself, nothing but these three is ever opened.
sharp.block({ operation: ['VipsForeignLoad'] })
sharp.unblock({ operation: ['VipsForeignLoadJpeg', 'VipsForeignLoadPng', 'VipsForeignLoadWebp'] })
sharp.cache(false)
sharp.concurrency(1)

export interface Picture {
  jpeg: Buffer
  widthPx: number
  heightPx: number
}

const startsWith = (content: Buffer, bytes: string, at = 0) =>
  content.subarray(at, at + bytes.length).equals(Buffer.from(bytes, 'latin1'))

/** By what it begins with, not by what it is called (JFIF, PNG and RIFF/WebP specifications). */
export function formatOf(content: Buffer): 'jpeg' | 'png' | 'webp' | null {
  if (startsWith(content, '\xff\xd8\xff')) return 'jpeg'
  if (startsWith(content, '\x89PNG\r\n\x1a\n')) return 'png'
  if (startsWith(content, 'RIFF') && startsWith(content, 'WEBP', 8)) return 'webp'
  return null
}

let working = 0
const waiting: (() => void)[] = []

async function inTurn<Result>(work: () => Promise<Result>): Promise<Result> {
  if (working >= mostAtOnce) {
    if (waiting.length >= mostWaiting) {
      throw makePassingProblem('busy', 'Too many photos are being read. Try again in a moment.', 5)
    }
    // Whoever finishes hands on the place, so that it stays counted.
    await new Promise<void>((resolve) => waiting.push(resolve))
  } else working += 1
  try {
    return await work()
  } finally {
    const next = waiting.shift()
    if (next) next()
    else working -= 1
  }
}

const damaged = () => makeProblem('invalid-fields', 'This picture is damaged and cannot be read.')

async function reencodeNow(content: Buffer): Promise<Picture> {
  const megapixels = workLimits.photoPixels / 1_000_000
  const options = { failOn: 'error', limitInputPixels: workLimits.photoPixels } as const
  const { width, height } = await sharp(content, { ...options, limitInputPixels: false })
    .metadata()
    .catch(() => {
      throw damaged()
    })
  if (width * height > workLimits.photoPixels) {
    throw makeProblem('invalid-fields', `A photo may have at most ${megapixels} megapixels.`)
  }
  const { data, info } = await sharp(content, options)
    .autoOrient()
    .resize({ width: longestSidePx, height: longestSidePx, fit: 'inside', withoutEnlargement: true })
    .flatten({ background: '#ffffff' })
    .jpeg({ quality: jpegQuality })
    .toBuffer({ resolveWithObject: true })
    .catch(() => {
      throw damaged()
    })
  return { jpeg: data, widthPx: info.width, heightPx: info.height }
}

/**
 * A picture as a JPEG of our own making, upright, of a sensible size, and with nothing but what is to be seen in it:
 * where and with what it was taken is left behind. Off the event loop, a few at a time.
 */
export function reencode(content: Buffer): Promise<Picture> {
  if (formatOf(content) === null) {
    throw makeProblem('wrong-content-type', 'This is not a JPEG, PNG or WebP picture, whatever it is called.')
  }
  return inTurn(() => reencodeNow(content))
}
