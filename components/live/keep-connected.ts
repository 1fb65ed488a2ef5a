import type { Socket } from 'socket.io-client'

const againAfterMs = 2_000

/**
 * The library connects again by itself after a loss, but not when the server has closed the socket or refused it.
 * A refusal for trouble of the server's own passes, so it is asked again; one that is about the person does not.
 * Answers how to stop.
 */
export function keepConnected(socket: Socket): () => void {
  let timer: ReturnType<typeof setTimeout> | undefined
  let isEnded = false
  const again = () => {
    clearTimeout(timer)
    timer = setTimeout(() => {
      if (!isEnded && !socket.active) socket.connect()
    }, againAfterMs)
  }
  const onDisconnect = (reason: string) => {
    if (reason === 'io server disconnect') again()
  }
  const onRefused = (error: Error & { data?: { status?: number } }) => {
    if (!socket.active && (error.data?.status ?? 503) >= 500) again()
  }
  const onEnded = () => {
    isEnded = true
  }
  socket.on('disconnect', onDisconnect)
  socket.on('connect_error', onRefused)
  socket.on('session:ended', onEnded)
  return () => {
    clearTimeout(timer)
    socket.off('disconnect', onDisconnect)
    socket.off('connect_error', onRefused)
    socket.off('session:ended', onEnded)
  }
}
