// One recording on its way: XHR, because fetch cannot tell how much of a body has gone out.
import { addressOf } from '@shared/contracts/route'
import { takeRoutes, type Take } from '@shared/contracts/takes'
import { offlineProblem, parseAnswer, problemOf } from '@client/lib/api'
import { createScope } from '@client/lib/scope'
import type { SendUpload } from './upload-types'

export const sendUpload: SendUpload = ({ id, file, details }, onSent, signal) =>
  new Promise<Take>((resolve, reject) => {
    const { groupId, title, tuneId, reach, over } = details
    // The fields go first, so that the server can refuse before it has taken in the whole file.
    const form = new FormData()
    form.set('id', id)
    form.set('title', title)
    if (tuneId) form.set('tuneId', tuneId)
    form.set('reach', reach)
    if (over) form.set('over', JSON.stringify(over))
    form.set('agreed', 'yes')
    form.set('recording', file, file.name)

    const xhr = new XMLHttpRequest()
    const scope = createScope()
    const done = (settle: () => void): void => {
      scope.dispose()
      settle()
    }
    scope.listen(xhr.upload, 'progress', (event) => {
      const { loaded, total } = event as ProgressEvent
      // The form's own bytes are a few hundred more than the file's.
      onSent(total > 0 ? Math.min(file.size, (loaded / total) * file.size) : 0)
    })
    scope.listen(xhr, 'load', () =>
      done(() => {
        if (xhr.status < 200 || xhr.status > 299) return reject(problemOf(xhr.status, xhr.responseText))
        try {
          resolve(parseAnswer(takeRoutes.upload, JSON.parse(xhr.responseText)))
        } catch {
          reject(problemOf(502, ''))
        }
      })
    )
    scope.listen(xhr, 'error', () => done(() => reject(offlineProblem())))
    scope.listen(xhr, 'abort', () => done(() => reject(new DOMException('The person called it off.', 'AbortError'))))
    scope.listen(signal, 'abort', () => xhr.abort())
    xhr.open(takeRoutes.upload.method, addressOf(takeRoutes.upload, { params: { groupId } }))
    xhr.send(form)
  })
