import { execFile } from 'node:child_process';
import { cp, mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { createServer } from 'node:https';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createVirtualRig } from '@/agent/virtual/rig';
import { fetchTrusting } from '@/agent/uplink/trusting-fetch';
import { loadConfig } from '@/agent/config';
import { buildAgent } from '@/scripts/build-agent.mjs';
import { makeAuthority } from '@/tests/support/authority';

const run = promisify(execFile);

let folder: string;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'agent-package-'));
  await buildAgent(join(folder, 'agent'));
});
afterAll(() => rm(folder, { recursive: true, force: true }));

/** Runs the packaged agent with nothing of this repository around it. */
async function packaged(...args: string[]) {
  const start = join(folder, 'agent/ellwand-agent');
  const result = run('env', ['-i', `ELLWAND_NODE=${process.execPath}`, start, ...args], { cwd: folder });
  return result.then(
    ({ stdout, stderr }) => ({ stdout, stderr, code: 0 }),
    (error: { stdout: string; stderr: string; code: number }) => error,
  );
}

async function configFile(name: string, config: object): Promise<string> {
  const path = join(folder, name);
  await writeFile(path, JSON.stringify(config, null, 2));
  return path;
}

describe('the agent’s folder', () => {
  it('runs with Node alone and opens a serial port', async () => {
    const rig = createVirtualRig({ tty: join(folder, 'tty'), speed: 20, resetOnOpen: false });
    await rig.start();
    try {
      const rigs = [{ rig: 'Curlew', port: join(folder, 'tty') }];
      const config = await configFile('alone.json', {
        server: 'http://127.0.0.1:9',
        dataDir: 'none',
        clockSpeed: 20,
        rigs,
      });
      const { stdout, code } = await packaged('doctor', '--json', '--config', config);
      expect(JSON.parse(stdout)).toMatchObject({
        agentRuns: false,
        rigs: [{ rig: 'Curlew', firmware: { virtual: true } }],
        server: { reachable: false },
      });
      expect(code).toBe(1);
    } finally {
      await rig.stop();
    }
    expect(await readdir(folder)).not.toContain('none');
  });

  it('says the line of a wrong configuration and does not start', async () => {
    const config = await configFile('wrong.json', { server: 'https://e.example', dataDir: 'd', rigs: [] });
    const { stderr, code } = await packaged('--config', config);
    expect([code, stderr]).toEqual([1, expect.stringContaining('wrong.json, line 4: "rigs"')]);
  });

  it('has an example configuration that is taken, once the code is filled in', async () => {
    await cp(join(folder, 'agent/agent.example.json'), join(folder, 'example.json'));
    expect((await loadConfig(join(folder, 'example.json'))).rigs).toHaveLength(3);
  });

  it('names the licence of every package in it', async () => {
    const text = await readFile(join(folder, 'agent/LICENCES.txt'), 'utf8');
    for (const name of ['commander', 'serialport', '@serialport/bindings-cpp', 'node-gyp-build', 'zod']) {
      expect(text).toMatch(new RegExp(`^${name} \\d+\\.\\d+`, 'm'));
    }
  });
});

describe('a server whose certificate is of an own authority', () => {
  it('is refused, and trusted only with that authority’s file', async () => {
    const authority = await makeAuthority(folder);
    const server = createServer(authority.server, (request, response) => {
      request.resume();
      response.writeHead(200, { 'content-type': 'application/json' });
      response.write('{"heard":');
      request.on('end', () => response.end(`"${request.method ?? ''}"}`));
    });
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
    const address = `https://127.0.0.1:${(server.address() as AddressInfo).port}`;
    try {
      const config = { server: address, dataDir: 'none', rigs: [{ rig: 'Curlew', port: '/dev/null' }] };
      const without = await packaged('doctor', '--json', '--config', await configFile('strict.json', config));
      expect(without.stdout).toContain('certificate-unknown');
      const trusting = { ...config, caFile: 'authority.pem' };
      const own = await packaged('doctor', '--json', '--config', await configFile('own.json', trusting));
      expect(JSON.parse(own.stdout)).toMatchObject({ server: { reachable: true } });
      const call = fetchTrusting(authority.certificate);
      expect(await (await call(address, { method: 'POST', body: '{}' })).json()).toEqual({ heard: 'POST' });
      await expect(call(address.replace('127.0.0.1', 'localhost'))).rejects.toMatchObject({
        code: 'ERR_TLS_CERT_ALTNAME_INVALID',
      });
      await expect(call(address, { signal: AbortSignal.abort() })).rejects.toMatchObject({
        name: 'AbortError',
      });
    } finally {
      server.closeAllConnections();
      await new Promise((resolve) => server.close(resolve));
    }
  });
});
