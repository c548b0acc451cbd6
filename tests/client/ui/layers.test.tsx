import { cleanup, fireEvent, render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { useState } from 'react'
import { afterEach, beforeAll, describe, expect, it, vi } from 'vitest'
import { liveScopes } from '@client/lib/scope'
import { Button } from '@client/ui/button'
import { Dialog } from '@client/ui/dialog'
import { Menu } from '@client/ui/menu'
import { placeBeside } from '@client/ui/place-beside'
import { standInForLayers } from './layers-stand-in'

beforeAll(standInForLayers)
afterEach(cleanup)

function Asking({ mustAnswer = false }: { mustAnswer?: boolean }) {
  const [isOpen, setOpen] = useState(false)
  return (
    <>
      <Button onClick={() => setOpen(true)}>Open</Button>
      {isOpen ? (
        <Dialog title="Sure?" mustAnswer={mustAnswer} onClose={() => setOpen(false)}>
          <Button onClick={() => setOpen(false)}>Yes</Button>
        </Dialog>
      ) : null}
    </>
  )
}

describe('Dialog', () => {
  it('carries its title as name and gives the focus back when it leaves', async () => {
    const user = userEvent.setup()
    render(<Asking />)
    await user.click(screen.getByRole('button', { name: 'Open' }))
    expect(screen.getByRole('dialog', { name: 'Sure?' })).toBeDefined()
    screen.getByRole('button', { name: 'Yes' }).focus()
    await user.click(screen.getByRole('button', { name: 'Close' }))
    expect(screen.queryByRole('dialog')).toBeNull()
    expect(document.activeElement).toBe(screen.getByRole('button', { name: 'Open' }))
  })

  it('closes on Esc, unless it must be answered', async () => {
    const user = userEvent.setup()
    const { unmount } = render(<Asking />)
    await user.click(screen.getByRole('button', { name: 'Open' }))
    fireEvent(screen.getByRole('dialog'), new Event('cancel', { cancelable: true }))
    expect(screen.queryByRole('dialog')).toBeNull()
    unmount()
    render(<Asking mustAnswer />)
    await user.click(screen.getByRole('button', { name: 'Open' }))
    fireEvent(screen.getByRole('dialog'), new Event('cancel', { cancelable: true }))
    expect(screen.getByRole('dialog')).toBeDefined()
  })
})

describe('Menu', () => {
  const setup = () => {
    const chosen = vi.fn()
    const item = (key: string, label: string, disabled = false) => ({
      key,
      label,
      disabled,
      onChoose: () => chosen(key)
    })
    render(
      <Menu label="More" items={[item('edit', 'Edit'), item('loop', 'Loop it', true), item('delete', 'Delete')]} />
    )
    return { chosen, user: userEvent.setup(), button: screen.getByRole('button', { name: 'More' }) }
  }
  const focused = () => document.activeElement?.textContent

  it('opens on the first item, or on the last with the up arrow', async () => {
    const { user, button } = setup()
    await user.click(button)
    expect(focused()).toBe('Edit')
    await user.keyboard('{Escape}')
    expect(document.activeElement).toBe(button)
    await user.keyboard('{ArrowUp}')
    expect(focused()).toBe('Delete')
  })

  it('moves by arrows round the ends, Home, End and first letter', async () => {
    const { user, button } = setup()
    await user.click(button)
    await user.keyboard('{ArrowDown}')
    expect(focused()).toBe('Loop it')
    await user.keyboard('{End}')
    expect(focused()).toBe('Delete')
    await user.keyboard('{ArrowDown}')
    expect(focused()).toBe('Edit')
    await user.keyboard('d')
    expect(focused()).toBe('Delete')
    await user.keyboard('{Home}')
    expect(focused()).toBe('Edit')
  })

  it('chooses with Enter, closes and gives the focus back', async () => {
    const { user, button, chosen } = setup()
    await user.click(button)
    await user.keyboard('{End}{Enter}')
    expect(chosen).toHaveBeenCalledExactlyOnceWith('delete')
    expect(screen.queryByRole('menu')).toBeNull()
    expect(document.activeElement).toBe(button)
  })

  it('does nothing for an item that cannot be chosen now', async () => {
    const { user, button, chosen } = setup()
    await user.click(button)
    await user.keyboard('{ArrowDown}{Enter}')
    expect(chosen).not.toHaveBeenCalled()
    expect(screen.getByRole('menu')).toBeDefined()
  })

  it('closes on a press outside and leaves no scope behind', async () => {
    const before = liveScopes()
    const { user, button } = setup()
    await user.click(button)
    await user.click(document.body)
    expect(screen.queryByRole('menu')).toBeNull()
    cleanup()
    expect(liveScopes()).toBe(before)
  })
})

describe('placeBeside', () => {
  const view = { width: 360, height: 640 }
  const box = { width: 180, height: 200 }

  it('stands under its button where there is room, above where there is not', () => {
    expect(placeBeside({ left: 20, right: 60, top: 100, bottom: 136 }, box, view, 'start')).toEqual({
      left: 20,
      top: 140
    })
    expect(placeBeside({ left: 20, right: 60, top: 500, bottom: 536 }, box, view, 'start').top).toBe(296)
  })

  it('never leaves the window sideways', () => {
    expect(placeBeside({ left: 320, right: 350, top: 0, bottom: 30 }, box, view, 'start').left).toBe(172)
    expect(placeBeside({ left: 10, right: 40, top: 0, bottom: 30 }, box, view, 'end').left).toBe(8)
  })
})
