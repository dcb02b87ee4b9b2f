import { describe, expect, it } from 'vitest';
import { adviceOnCall } from '@/agent/doctor/advice';
import type { Findings } from '@/agent/doctor/findings';
import { printFindings } from '@/agent/doctor/print';
import { problemsOfState } from '@/agent/doctor/state';
import type { AgentState } from '@/agent/stop/state';

const failed = (code: string) =>
  Object.assign(new TypeError('fetch failed'), { cause: Object.assign(new Error(code), { code }) });

describe('a call of the server that failed', () => {
  it.each([
    ['DEPTH_ZERO_SELF_SIGNED_CERT', 'certificate-unknown'],
    ['SELF_SIGNED_CERT_IN_CHAIN', 'certificate-unknown'],
    ['UNABLE_TO_VERIFY_LEAF_SIGNATURE', 'certificate-unknown'],
    ['UNABLE_TO_GET_ISSUER_CERT_LOCALLY', 'certificate-unknown'],
    ['CERT_HAS_EXPIRED', 'certificate-date'],
    ['ERR_TLS_CERT_ALTNAME_INVALID', 'certificate-name'],
    ['ENOTFOUND', 'server-unnamed'],
    ['ECONNREFUSED', 'server-away'],
  ])('by %s is told as %s', (cause, code) => {
    expect(adviceOnCall('https://e.example', failed(cause)).code).toBe(code);
  });

  it('for no known reason is told, too', () => {
    expect(adviceOnCall('https://e.example', 'odd').says).toContain('https://e.example');
  });
});

const rig = '00000000-0000-4000-8000-000000000010';
const well: AgentState = {
  software: 'ellwand-agent 0.2.0',
  rigs: [
    {
      rig: 'Curlew',
      report: {
        rigId: rig,
        port: 'open',
        portProblem: null,
        firmware: null,
        signals: {
          guard: { reading: 'not fitted' },
          wire: { reading: 'not fitted' },
          heater: { reading: 'not fitted' },
        },
        runner: 'idle',
        runId: null,
        programSha256: null,
        piecesCut: 0,
        holdReason: null,
        workHold: false,
        challenge: 'challenge-of-the-test',
        fence: 0,
        virtualDisplay: null,
      },
    },
  ],
  journal: { id: 'j', unacknowledged: 3, earlier: 0, full: false, damaged: false },
  link: [],
  clockSkewMs: 0,
};

describe('what a running agent tells', () => {
  const report = well.rigs[0]?.report ?? null;
  const withReport = (over: object): AgentState => ({
    ...well,
    rigs: [{ rig: 'Curlew', report: report && { ...report, ...over } }],
  });

  it.each<[string, AgentState, string[]]>([
    ['nothing wrong', well, []],
    ['a port that is away', withReport({ port: 'closed', portProblem: 'gone' }), ['port-closed']],
    ['a port that is refused', withReport({ port: 'refused', portProblem: 'two' }), ['port-refused']],
    ['an odd opening', withReport({ portProblem: 'The board began anew' }), ['port-noted']],
    ['a rig of nobody', { ...well, rigs: [{ rig: 'Knot', report: null }] }, ['rig-not-bound']],
    ['a full journal', { ...well, journal: { ...well.journal, full: true } }, ['journal-full']],
    [
      'a server that is away',
      { ...well, link: [{ topic: 'reports', code: 'service-away', text: 'kept' }] },
      ['service-away'],
    ],
  ])('is %s', (_what, state, codes) => {
    expect(problemsOfState(state).map(({ code }) => code)).toEqual(codes);
  });
});

describe('the printed findings', () => {
  const blank: Findings = {
    well: true,
    software: 'ellwand-agent 0.2.0',
    configuration: 'agent.json',
    agentRuns: false,
    ports: [],
    rigs: [],
    server: null,
    journal: null,
    problems: [],
  };

  it('say so when there is nothing to do', () => {
    expect(printFindings(blank)).toContain('all is well');
  });

  it('name what is wrong and what to do in this order', () => {
    const problem = {
      about: 'rig',
      rig: 'Curlew',
      code: 'x',
      says: 'The guard is open.',
      toDo: 'Shut it.',
    } as const;
    const text = printFindings({ ...blank, well: false, problems: [problem] });
    expect(text.indexOf('Curlew: The guard is open.')).toBeGreaterThan(0);
    expect(text.indexOf('Shut it.')).toBeGreaterThan(text.indexOf('The guard is open.'));
  });
});
