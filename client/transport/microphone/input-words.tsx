import { Notice } from '@client/ui/notice'
import { Select } from '@client/ui/select'
import type { Microphone } from './use-microphone'

/** Which input it is, and whether the browser leaves the sound alone. */
export function InputWords({ microphone }: { microphone: Microphone }) {
  const { inputs, inputId, obeyed } = microphone
  return (
    <>
      {inputs.length > 1 ? (
        <Select
          label="Input"
          value={inputId}
          choices={inputs.map(({ id, name }) => ({ value: id, label: name }))}
          onChange={microphone.open}
        />
      ) : (
        <p className="text-sm text-pencil">Input: {inputs[0]?.name ?? 'the one the browser chose'}</p>
      )}
      {obeyed && !obeyed.hasObeyed ? (
        <Notice>{obeyed.words}</Notice>
      ) : (
        <p className="text-sm text-pencil">{obeyed?.words}</p>
      )}
    </>
  )
}
