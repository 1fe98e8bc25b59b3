import { crc32, inflateRawSync } from 'node:zlib'

/** The files of a ZIP by name, read from its central directory (PKWARE APPNOTE 4.3), each checked against its CRC. */
export function readZip(zip: Buffer): Map<string, string> {
  const end = zip.lastIndexOf(Buffer.from('PK\x05\x06', 'latin1'))
  if (end < 0) throw new Error('This is not a ZIP.')
  const count = zip.readUInt16LE(end + 10)
  let at = zip.readUInt32LE(end + 16)
  const files = new Map<string, string>()
  for (let index = 0; index < count; index += 1) {
    if (zip.toString('latin1', at, at + 4) !== 'PK\x01\x02') throw new Error('The directory is broken.')
    const nameLength = zip.readUInt16LE(at + 28)
    const name = zip.toString('utf8', at + 46, at + 46 + nameLength)
    const local = zip.readUInt32LE(at + 42)
    const start = local + 30 + zip.readUInt16LE(local + 26) + zip.readUInt16LE(local + 28)
    const packed = zip.subarray(start, start + zip.readUInt32LE(at + 20))
    const content = zip.readUInt16LE(at + 10) === 0 ? packed : inflateRawSync(packed)
    if (crc32(content) !== zip.readUInt32LE(at + 16)) throw new Error(`${name} is damaged.`)
    files.set(name, content.toString('utf8'))
    at += 46 + nameLength + zip.readUInt16LE(at + 30) + zip.readUInt16LE(at + 32)
  }
  return files
}
