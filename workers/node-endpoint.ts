/** A worker thread's port as comlink wants it: listeners get events whose `data` is the message. */
import type { Endpoint } from 'comlink'

interface Port {
  postMessage(message: unknown, transfer?: readonly never[]): void
  on(event: 'message', listener: (message: unknown) => void): unknown
  off(event: 'message', listener: (message: unknown) => void): unknown
}
type Listener = Parameters<Endpoint['addEventListener']>[1]

/** Wraps a `Worker` or `parentPort` of node:worker_threads. */
export function nodeEndpoint(port: Port): Endpoint {
  const wrapped = new WeakMap<object, (message: unknown) => void>()
  return {
    postMessage: (message, transfer) => port.postMessage(message, transfer as readonly never[] | undefined),
    addEventListener(_type, listener: Listener) {
      const hear = (data: unknown) => {
        const event = { data } as MessageEvent
        if (typeof listener === 'function') listener(event)
        else listener.handleEvent(event)
      }
      port.on('message', hear)
      wrapped.set(listener, hear)
    },
    removeEventListener(_type, listener: Listener) {
      const hear = wrapped.get(listener)
      if (hear) port.off('message', hear)
      wrapped.delete(listener)
    },
  }
}
