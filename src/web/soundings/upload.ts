import { call } from '../api/client.ts'
import { type ProfileAnswer } from '../../service/schemas/profile.ts'

/** Content types by the ending of a file's name; what the service reads decides the content alone. */
const TYPES: Partial<Record<string, string>> = {
  json: 'application/json',
  csv: 'text/csv',
  txt: 'text/plain',
}

/** What may be said about a file of soundings beside its content. */
export interface UploadWords {
  name: string
  /** As a field for date and time gives it, UTC; empty where nothing is said */
  validAt: string
}

/** The query that says `words`: nothing where they are empty, so that the content speaks. */
export function uploadQuery({ name, validAt }: UploadWords): string {
  const query = new URLSearchParams()
  if (name.trim() !== '') query.set('name', name.trim())
  if (validAt !== '') query.set('validAt', `${validAt.slice(0, 16)}:00Z`)
  const text = query.toString()
  return text === '' ? '' : `?${text}`
}

/** The content type that a file is sent with. */
export function contentType(fileName: string): string {
  const ending = fileName.toLowerCase().split('.').at(-1) ?? ''
  return TYPES[ending] ?? 'application/octet-stream'
}

/**
 * Sends a file of soundings, answers what was read from it.
 * @throws ServiceProblem where it holds none that can be flown in, ServiceAway
 */
export async function uploadSoundings(file: File, words: UploadWords): Promise<ProfileAnswer[]> {
  const { profiles } = await call<{ profiles: ProfileAnswer[] }>(
    'POST',
    `/v1/profiles${uploadQuery(words)}`,
    file,
    { headers: { 'content-type': contentType(file.name) } },
  )
  return profiles
}
