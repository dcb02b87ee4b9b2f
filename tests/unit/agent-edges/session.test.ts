import { afterEach, describe, expect, it } from 'vitest';
import type { FoundPort } from '@/agent/link/ports';
import { createSession, type Session } from '@/agent/rig/session';
import { HandClock, settle } from '../agent/hand-clock';
import { TestPort } from '../agent/test-port';

const MARLIN = 'FIRMWARE_NAME:Marlin 2.1 PROTOCOL_VERSION:1.0 MACHINE_TYPE:rig\n';

/** A session whose firmware answers everything, with all that it tells. */
class Stand {
  readonly clock = new HandClock();
  readonly told: [string, string | null][] = [];
  readonly opened: string[] = [];
  port = new TestPort();
  found: FoundPort = { found: true, path: '/dev/ttyUSB0' };
  objection: string | null = null;
  readonly session: Session;

  constructor({ resetsOnOpen = false, banner = false } = {}) {
    this.session = createSession({
      findPort: () => Promise.resolve(this.found),
      serial: () => ({ baudRate: 115200, resetsOnOpen }),
      openPort: ({ path }) => {
        this.opened.push(path);
        this.port = new TestPort((line) =>
          line.includes('M115') ? `${MARLIN}ok\n` : line === '\n' ? null : 'ok\n',
        );
        if (banner) this.clock.after(300, () => this.port.say('start\n'));
        return Promise.resolve(this.port);
      },
      clock: this.clock,
      objection: () => this.objection,
      random: () => 0,
      events: {
        opening: () => undefined,
        met: (_firmware, _banner, notice) => this.told.push(['met', notice]),
        stranger: (reason) => this.told.push(['stranger', reason]),
        unreachable: (reason) => this.told.push(['unreachable', reason]),
        lost: (failure) => this.told.push(['lost', failure]),
        heard: () => undefined,
      },
    });
  }

  async pass(ms: number): Promise<void> {
    await this.clock.pass(ms);
    await settle();
  }
}

let stand: Stand;
afterEach(() => stand.session.close());

function begin(options?: ConstructorParameters<typeof Stand>[0]): Stand {
  stand = new Stand(options);
  stand.session.start();
  return stand;
}

describe('a rig’s port over time', () => {
  it('is looked for at each opening, and found under another name', async () => {
    const { opened, told } = begin();
    await stand.pass(5_000);
    await stand.port.close();
    stand.found = { found: false, refused: false, reason: 'No port.' };
    await stand.pass(5_000);
    stand.found = { found: true, path: '/dev/ttyUSB3' };
    await stand.pass(10_000);
    expect(opened).toEqual(['/dev/ttyUSB0', '/dev/ttyUSB3']);
    expect(told[0]).toEqual(['met', null]);
    expect(told).toContainEqual(['unreachable', 'No port.']);
    expect(told.at(-1)).toEqual(['met', null]);
  });

  it('that a person must settle is refused and not opened', async () => {
    stand = new Stand();
    stand.found = { found: false, refused: true, reason: 'Two ports.' };
    stand.session.start();
    await stand.pass(5_000);
    expect(stand.told[0]).toEqual(['stranger', 'Two ports.']);
    expect(stand.opened).toEqual([]);
  });

  it('of a firmware that this agent does not serve is refused, and no conversation is handed out', async () => {
    stand = new Stand();
    stand.objection = 'Virtual rigs alone.';
    stand.session.start();
    await stand.pass(5_000);
    expect(stand.told).toEqual([['stranger', 'Virtual rigs alone.']]);
    expect(stand.session.conversation).toBeNull();
  });
});

describe('a reset on opening', () => {
  it.each([
    [true, true, null],
    [false, false, null],
    [false, true, 'set "resets on open"'],
    [true, false, 'clear "resets on open"'],
  ])('by profile %s and seen %s is told where they differ', async (resetsOnOpen, banner, words) => {
    begin({ resetsOnOpen, banner });
    await stand.pass(20_000);
    const notice = words === null ? null : (expect.stringContaining(words) as string);
    expect(stand.told).toEqual([['met', notice]]);
    expect(stand.told[0]?.[1]?.length ?? 0).toBeLessThanOrEqual(200);
  });

  it('in mid-life is no sign of what an opening does', async () => {
    begin();
    await stand.pass(5_000);
    stand.port.say('start\n');
    await stand.pass(10_000);
    expect(stand.told).toEqual([
      ['met', null],
      ['lost', 'reset'],
      ['met', null],
    ]);
  });
});
