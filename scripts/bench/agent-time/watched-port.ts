import type { OpenPort, Port } from '@/agent/link/port';
import type { Passed } from './added-time';

/** Opens ports as `open` does, and notes what passes at the agent's side of the serial wrapper, and when. */
export function watchPort(open: OpenPort, note: (passed: Passed) => void): OpenPort {
  return async (options) => {
    const port = await open(options);
    const watched: Port = {
      get isOpen() {
        return port.isOpen;
      },
      write(text) {
        note({ towards: 'rig', atMs: performance.now(), text });
        port.write(text);
      },
      onData: (listener) =>
        port.onData((text) => {
          note({ towards: 'agent', atMs: performance.now(), text });
          listener(text);
        }),
      onClose: (listener) => port.onClose(listener),
      close: () => port.close(),
    };
    return watched;
  };
}
