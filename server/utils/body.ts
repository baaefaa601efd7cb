import { createHash } from 'node:crypto'
import { createWriteStream } from 'node:fs'
import { mkdir, rm } from 'node:fs/promises'
import { join } from 'node:path'
import { Transform } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import busboy from 'busboy'
import type { H3Event } from 'h3'
import { secretToken } from '../services/hash'
import { Problem } from './problem'

const mib = (bytes: number) => `${(bytes / 1024 / 1024).toFixed(0)} MiB`

function tooLarge(limit: number) {
  return new Problem(413, 'too-large', `The body is larger than ${mib(limit)}, the most that is taken here.`)
}

/** Reads a JSON body, counting bytes as they come so that nothing too large is ever held. */
export async function readJson(event: H3Event, limit: number): Promise<{ text: string, value: unknown }> {
  const request = event.node.req
  if (Number(request.headers['content-length'] ?? 0) > limit) throw tooLarge(limit)
  const chunks: Buffer[] = []
  let bytes = 0
  for await (const chunk of request) {
    bytes += (chunk as Buffer).length
    if (bytes > limit) throw tooLarge(limit)
    chunks.push(chunk as Buffer)
  }
  const text = Buffer.concat(chunks).toString('utf8')
  return { text, value: text.trim() === '' ? undefined : parseJson(text) }
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text)
  }
  catch (error) {
    throw new Problem(400, 'not-json', `The body is not JSON: ${(error as Error).message}`)
  }
}

/** A file that was sent: on disk, with its size and checksum, to be kept or thrown away. */
export interface Upload { path: string, name: string, type: string, bytes: number, sha256: string }

/** Streams a multipart body: the part `file` to a temporary file, the part `options` read as JSON. */
export async function readMultipart(event: H3Event, folder: string, limit: number): Promise<{ upload: Upload, options: unknown, discard: () => Promise<void> }> {
  const request = event.node.req
  if (!/^multipart\/form-data/i.test(request.headers['content-type'] ?? '')) {
    throw new Problem(415, 'not-multipart', 'Send multipart/form-data with a part “file” and a part “options” that holds JSON.')
  }
  if (Number(request.headers['content-length'] ?? 0) > limit + 65536) throw tooLarge(limit)
  await mkdir(folder, { recursive: true })
  const path = join(folder, `upload-${secretToken()}`)
  const discard = () => rm(path, { force: true })

  let upload: Upload | undefined
  let optionsText: string | undefined
  let writing: Promise<void> | undefined
  let cut = false
  const parser = busboy({ headers: request.headers, defParamCharset: 'utf8', limits: { files: 1, fileSize: limit, fields: 10, fieldSize: 1024 * 1024 } })
  parser.on('file', (part, stream, info) => {
    if (part !== 'file' || upload) return void stream.resume()
    const hash = createHash('sha256')
    let bytes = 0
    const count = new Transform({
      transform(chunk: Buffer, _encoding, done) {
        bytes += chunk.length
        hash.update(chunk)
        done(null, chunk)
      },
    })
    stream.on('limit', () => { cut = true })
    writing = pipeline(stream, count, createWriteStream(path, { mode: 0o600 })).then(() => {
      upload = { path, name: info.filename || 'pasted.txt', type: info.mimeType, bytes, sha256: hash.digest('hex') }
    })
  })
  parser.on('field', (part, text) => {
    if (part === 'options') optionsText = text
  })
  try {
    await pipeline(request, parser)
    await writing
    if (cut) throw tooLarge(limit)
    if (!upload) throw new Problem(422, 'no-file', 'There is no part “file” in the body.')
    return { upload, options: optionsText === undefined ? {} : parseJson(optionsText), discard }
  }
  catch (error) {
    await discard()
    throw error instanceof Problem ? error : new Problem(400, 'not-multipart', `The multipart body cannot be read: ${(error as Error).message}`)
  }
}
