import { ServiceAway, ServiceProblem } from '../api/client.ts'
import { type FieldAnswer } from '../../service/schemas/field.ts'

/**
 * Sends a forecast file; `onSent` is told the share that is on its way, 0 to 1. A forecast is too large
 * to be left without word of it, and only this older way of asking tells.
 * @throws ServiceProblem where it holds no forecast that can be flown in, ServiceAway
 */
export function uploadField(file: File, onSent: (share: number) => void): Promise<FieldAnswer> {
  return new Promise((resolve, reject) => {
    const request = new XMLHttpRequest()
    request.open('POST', '/v1/fields')
    request.setRequestHeader('content-type', 'application/octet-stream')
    request.responseType = 'text'
    request.upload.onprogress = ({ loaded, total }) => {
      onSent(total > 0 ? loaded / total : 0)
    }
    request.onerror = () => {
      reject(new ServiceAway())
    }
    request.onload = () => {
      const text = request.responseText
      if (request.status === 201) resolve(JSON.parse(text) as FieldAnswer)
      else if (request.getResponseHeader('content-type')?.includes('problem+json')) {
        reject(new ServiceProblem(JSON.parse(text) as Problem))
      } else reject(new ServiceAway())
    }
    request.send(file)
  })
}

type Problem = ConstructorParameters<typeof ServiceProblem>[0]
