import type { Firmware } from '@/lib/protocol/report';

/**
 * Whom an agent with this clock does not serve: what is not virtual, when it waits shorter than a machine takes.
 * @param clockSpeed from 1 @returns given a firmware, the reason, or null when it is served
 */
export function objectionAt(clockSpeed: number): (firmware: Firmware) => string | null {
  return ({ virtual }) =>
    clockSpeed === 1 || virtual
      ? null
      : `This agent's clock runs ${clockSpeed} times as fast, which is for virtual rigs alone. Take "clockSpeed" out of its configuration.`;
}
