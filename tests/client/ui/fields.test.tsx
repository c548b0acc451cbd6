import { cleanup, fireEvent, render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { useState } from 'react'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { Button } from '@client/ui/button'
import { Checkbox } from '@client/ui/checkbox'
import { DropZone } from '@client/ui/drop-zone'
import { Form } from '@client/ui/faults'
import { Sentence, SentenceNumber } from '@client/ui/sentence'
import { TextField } from '@client/ui/text-field'

afterEach(cleanup)

describe('Form', () => {
  const errors = [
    { in: 'body', path: 'title', message: 'A tune needs a title.' },
    { in: 'body', path: 'agreed', message: 'Say that they agree.' },
    { in: 'body', path: 'meter', message: 'No such meter.' }
  ]

  it('shows each fault at its own field, tied to it, and the homeless ones on top', () => {
    render(
      <Form errors={errors} onSubmit={() => undefined}>
        <TextField label="Title" name="title" hint="As you call it." />
        <Checkbox label="They agree" name="agreed" />
        <TextField label="Key" name="key" />
      </Form>
    )
    const title = screen.getByLabelText('Title')
    expect(title.getAttribute('aria-invalid')).toBe('true')
    const described = (title.getAttribute('aria-describedby') ?? '').split(' ')
    const words = described.map((id) => document.getElementById(id)?.textContent).join(' ')
    expect(words).toContain('As you call it.')
    expect(words).toContain('A tune needs a title.')
    expect(screen.getByLabelText('They agree').getAttribute('aria-invalid')).toBe('true')
    expect(screen.getByLabelText('Key').hasAttribute('aria-invalid')).toBe(false)
    expect(screen.getByRole('alert').textContent).toBe('No such meter.')
  })

  it('submits without leaving the page', async () => {
    const submitted = vi.fn()
    render(
      <Form onSubmit={submitted}>
        <TextField label="Title" name="title" />
        <Button type="submit">Keep</Button>
      </Form>
    )
    await userEvent.setup().type(screen.getByLabelText('Title'), 'Slack Tide{Enter}')
    expect(submitted).toHaveBeenCalledOnce()
  })
})

describe('Button', () => {
  it('keeps the focus and swallows clicks and submits while busy', async () => {
    const clicked = vi.fn()
    const submitted = vi.fn()
    render(
      <Form onSubmit={submitted}>
        <Button type="submit" busy onClick={clicked}>
          Sending
        </Button>
      </Form>
    )
    const button = screen.getByRole('button')
    await userEvent.setup().click(button)
    expect(document.activeElement).toBe(button)
    expect(clicked).not.toHaveBeenCalled()
    expect(submitted).not.toHaveBeenCalled()
  })
})

describe('SentenceNumber', () => {
  function Faster({ onChange = () => undefined }: { onChange?: (value: number) => void }) {
    const [value, setValue] = useState(60)
    return (
      <Sentence label="Faster">
        from{' '}
        <SentenceNumber
          label="starting speed"
          unit=" %"
          min={20}
          max={150}
          step={5}
          value={value}
          onChange={(next) => {
            setValue(next)
            onChange(next)
          }}
        />
      </Sentence>
    )
  }
  const part = () => screen.getByRole<HTMLInputElement>('spinbutton', { name: 'starting speed' })

  it('reads as words of the sentence and takes a typed number with Enter', async () => {
    const user = userEvent.setup()
    render(<Faster />)
    expect(part().value).toBe('60 %')
    await user.click(part())
    await user.clear(part())
    await user.type(part(), '72,5{Enter}')
    await user.tab()
    expect(part().value).toBe('72.5 %')
    expect(part().getAttribute('aria-valuetext')).toBe('72.5 %')
  })

  it('steps with the arrows, stays within its bounds and takes a draft back with Esc', async () => {
    const user = userEvent.setup()
    const changed = vi.fn()
    render(<Faster onChange={changed} />)
    await user.click(part())
    await user.keyboard('{ArrowUp}')
    expect(changed).toHaveBeenLastCalledWith(65)
    await user.clear(part())
    await user.type(part(), '9000{Enter}')
    expect(changed).toHaveBeenLastCalledWith(150)
    await user.clear(part())
    await user.type(part(), '30{Escape}')
    await user.tab()
    expect(changed).toHaveBeenLastCalledWith(150)
  })

  it('keeps the old number when the draft is none', async () => {
    const user = userEvent.setup()
    const changed = vi.fn()
    render(<Faster onChange={changed} />)
    await user.click(part())
    await user.clear(part())
    await user.type(part(), 'fast')
    await user.tab()
    expect(part().value).toBe('60 %')
    expect(changed).not.toHaveBeenCalled()
  })
})

describe('DropZone', () => {
  const file = (name: string) => new File(['x'], name)
  const setup = (multiple: boolean) => {
    const given = vi.fn()
    render(<DropZone title="Drop a recording here" says="wav or mp3" multiple={multiple} onFiles={given} />)
    return { given, zone: screen.getByText('Drop a recording here') }
  }
  const carrying = (...files: File[]) => ({ dataTransfer: { types: ['Files'], files, dropEffect: 'none' } })

  it('takes dropped files and says that it would while they hang over it', () => {
    const { given, zone } = setup(true)
    fireEvent.dragEnter(zone, carrying(file('a.wav')))
    expect(screen.getByText('Let go to hand it over')).toBeDefined()
    fireEvent.drop(screen.getByText('Let go to hand it over'), carrying(file('a.wav'), file('b.wav')))
    expect(given.mock.calls[0]?.[0]).toHaveLength(2)
    expect(screen.getByText('Drop a recording here')).toBeDefined()
  })

  it('takes only the first where one is asked for, and nothing but files', () => {
    const { given, zone } = setup(false)
    fireEvent.drop(zone, { dataTransfer: { types: ['text/plain'], files: [] } })
    expect(given).not.toHaveBeenCalled()
    fireEvent.drop(zone, carrying(file('a.wav'), file('b.wav')))
    expect(given.mock.calls[0]?.[0]).toHaveLength(1)
  })

  it('opens the picker from the keyboard and takes the same file twice', async () => {
    const { given } = setup(false)
    const user = userEvent.setup()
    const picker = document.querySelector<HTMLInputElement>('input[type=file]')
    const opened = vi.spyOn(picker as HTMLInputElement, 'click')
    await user.tab()
    await user.keyboard('{Enter}')
    expect(opened).toHaveBeenCalledOnce()
    await user.upload(picker as HTMLInputElement, file('a.wav'))
    await user.upload(picker as HTMLInputElement, file('a.wav'))
    expect(given).toHaveBeenCalledTimes(2)
  })
})
