/** Tells this person's other tabs of the same browser. Messages never leave the machine. */
export interface Channel<T> {
  readonly tell: (message: T) => void;
  readonly close: () => void;
}

/** Opens a channel by name; every tab but the one that tells hears `onMessage`. `read` refuses what another release may have sent. */
export function openChannel<T>(
  name: string,
  read: (message: unknown) => T | null,
  onMessage: (message: T) => void,
): Channel<T> {
  const channel = new BroadcastChannel(`quadrille:${name}`);
  channel.onmessage = (event: MessageEvent<unknown>) => {
    const message = read(event.data);
    if (message !== null) onMessage(message);
  };
  return { tell: (message) => channel.postMessage(message), close: () => channel.close() };
}
