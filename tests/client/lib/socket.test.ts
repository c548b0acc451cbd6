import { describe, expect, it, vi } from 'vitest'
import { closeSocket, roomSocket } from '@client/lib/socket'

describe('closeSocket', () => {
  it('keeps what listens for the next person, and nothing that the last one had not sent', () => {
    const socket = roomSocket()
    const handleEnded = vi.fn()
    socket.on('signIn:ended', handleEnded)
    socket.emit('clock:ask', {}, () => undefined)
    expect(socket.sendBuffer).toHaveLength(1)
    closeSocket()
    expect(roomSocket()).toBe(socket)
    expect(roomSocket().listeners('signIn:ended')).toEqual([handleEnded])
    expect(socket.sendBuffer).toEqual([])
  })
})
