import { KeySheet } from '@client/transport/key-sheet'
import { KeyEditor } from './key-editor'
import type { OwnKeys } from './use-own-keys'

/** The key sheet of somebody who is signed in: every key can be changed. */
export function OwnKeySheet({ keys, onClose }: { keys: OwnKeys; onClose: () => void }) {
  return (
    <KeySheet
      map={keys.map}
      areOff={keys.areOff}
      onOff={keys.setAreOff}
      onClose={onClose}
      editor={<KeyEditor map={keys.map} onMap={keys.setMap} />}
    />
  )
}
