import { closeSync, fstatSync, openSync, readFileSync, readSync } from 'node:fs'
import { readCsvGrid, type CsvGridOptions } from '#shared/grids/csvGrid'
import type { ByteSource, GridFile } from '#shared/grids/gridFile'
import { isNetcdfClassic, openNetcdfClassic } from '#shared/grids/netcdfClassic'
import { isHdf5, openNetcdf4 } from '#shared/grids/netcdf4'
import { decodeText } from '#shared/series/decodeText'
import type { Issue } from '#shared/types/issue'

export interface OpenedGridFile {
  file: GridFile
  /** Rows of a table that cannot be used; empty for NetCDF. */
  issues: Issue[]
  rowsRead: number | null
  close: () => void
}

/** Opens a grid on disk by what its first bytes say: NetCDF of either kind, read block by block, or a table. The caller closes it. */
export async function openGridFile(path: string, csv: CsvGridOptions = {}): Promise<OpenedGridFile> {
  const descriptor = openSync(path, 'r')
  const head = new Uint8Array(8)
  readSync(descriptor, head, 0, 8, 0)
  if (isNetcdfClassic(head)) return { file: openNetcdfClassic(sourceOfFile(descriptor)), issues: [], rowsRead: null, close: () => closeSync(descriptor) }
  closeSync(descriptor)
  if (isHdf5(head)) {
    // The library is some megabytes of WebAssembly: only those who need it wait for it.
    const { ready, File } = await import('h5wasm/node')
    await ready
    const opened = new File(path, 'r')
    return { file: openNetcdf4(opened), issues: [], rowsRead: null, close: () => void opened.close() }
  }
  const { file, issues, rowsRead } = readCsvGrid(decodeText(readFileSync(path)), csv)
  return { file, issues, rowsRead, close: () => {} }
}

function sourceOfFile(descriptor: number): ByteSource {
  const { size } = fstatSync(descriptor)
  return {
    size,
    read: (offset, length) => {
      if (offset < 0 || offset + length > size) throw new RangeError(`bytes ${offset} to ${offset + length} must lie in ${size} bytes`)
      const bytes = new Uint8Array(length)
      for (let read = 0; read < length;) {
        const more = readSync(descriptor, bytes, read, length - read, offset + read)
        if (more === 0) throw new RangeError(`the file ended at byte ${offset + read} of ${size}`)
        read += more
      }
      return bytes
    },
  }
}
