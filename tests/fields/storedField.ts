import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll } from 'vitest'
import { FieldFile } from '../../src/fields/fieldFile.ts'
import { storeField } from '../../src/fields/fieldWriter.ts'
import { inChunks } from './fixture.ts'

/** A folder of this test file's own, gone when its tests are done, and the fields stored in it. */
export function fieldFolder() {
  const folder = mkdtempSync(join(tmpdir(), 'driftbook-fields-'))
  const open: FieldFile[] = []
  afterAll(() => {
    for (const file of open) file.close()
    rmSync(folder, { recursive: true })
  })
  return {
    folder,
    path: (name: string) => join(folder, name),
    async store(bytes: Uint8Array, name: string): Promise<FieldFile> {
      await storeField(inChunks(bytes), join(folder, name))
      const file = new FieldFile(join(folder, name))
      open.push(file)
      return file
    },
  }
}
