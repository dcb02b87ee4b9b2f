import { writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import fc from 'fast-check';
import { ConfigError, loadConfig } from '@/agent/config';
import { JsonProblem, parseLocatedJson } from '@/agent/config/located-json';
import { makeFolder } from './journal-support';

async function fileWith(text: string): Promise<string> {
  const path = join(await makeFolder(), 'agent.json');
  await writeFile(path, text);
  return path;
}

async function problemsIn(text: string) {
  const error = await loadConfig(await fileWith(text)).catch((cause: unknown) => cause);
  if (!(error instanceof ConfigError)) throw new Error('the configuration was taken', { cause: error });
  return error.problems;
}

const GOOD = `{
  "server": "http://127.0.0.1:3000/",
  "dataDir": "state",
  "pairingCode": "ABCD-1234",
  "rigs": [
    { "rig": "Rig 1", "port": "/dev/ttyUSB0" },
    { "rig": "Rig 2", "port": "/dev/ttyUSB1" }
  ]
}`;

describe('the configuration of an agent', () => {
  it('is read with its folder beside the file and the address without a slash at the end', async () => {
    const path = await fileWith(GOOD);
    expect(await loadConfig(path)).toEqual({
      server: 'http://127.0.0.1:3000',
      dataDir: join(path, '..', 'state'),
      pairingCode: 'ABCD-1234',
      clockSpeed: 1,
      allowUnencrypted: false,
      log: { format: 'auto', level: 'info' },
      rigs: [
        { rig: 'Rig 1', port: '/dev/ttyUSB0' },
        { rig: 'Rig 2', port: '/dev/ttyUSB1' },
      ],
    });
  });

  it.each([
    ['a wrong address', GOOD.replace('http://127.0.0.1:3000/', 'workshop'), 2, 'server'],
    ['a port that is no text', GOOD.replace('"/dev/ttyUSB1"', '7'), 7, 'rigs.1.port'],
    ['a port given twice', GOOD.replace('USB1', 'USB0'), 7, 'rigs.1.port'],
    ['a rig given twice', GOOD.replace('Rig 2', 'Rig 1'), 7, 'rigs.1.rig'],
    ['a misspelt name', GOOD.replace('pairingCode', 'pairingcode'), 4, 'pairingcode'],
    ['a clock that is slow', GOOD.replace('"rigs"', '"clockSpeed": 0.5,\n"rigs"'), 5, 'clockSpeed'],
    ['a missing port', GOOD.replace(', "port": "/dev/ttyUSB1"', ''), 7, 'rigs.1.port'],
  ])('names the line and the place of %s', async (_what, text, line, path) => {
    expect(await problemsIn(text)).toEqual([expect.objectContaining({ line, path })]);
  });

  it('takes a port by what the board is, in any way of writing its numbers', async () => {
    const identity = '{ "vendorId": "0x1A86", "productId": "7523", "usbPath": "1-1.4" }';
    const { rigs } = await loadConfig(await fileWith(GOOD.replace('"/dev/ttyUSB1"', identity)));
    expect(rigs[1]?.port).toEqual({ vendorId: '1a86', productId: '7523', usbPath: '1-1.4' });
  });

  const identityPort = (fields: string) =>
    GOOD.replace('"/dev/ttyUSB1"', `{\n"vendorId": "1a86",\n${fields}\n}`);

  it.each([
    ['a product that is no number', identityPort('"productId": "CH340"'), 9, 'rigs.1.port.productId'],
    ['a missing product', identityPort('"serialNumber": "A5"'), 7, 'rigs.1.port.productId'],
    [
      'a socket that is none',
      identityPort('"productId": "7523",\n"usbPath": "left"'),
      10,
      'rigs.1.port.usbPath',
    ],
    [
      'a misspelt name in a port',
      identityPort('"productId": "7523",\n"serial": "A5"'),
      10,
      'rigs.1.port.serial',
    ],
    ['a log of another kind', GOOD.replace('"rigs"', '"log": { "level": "loud" },\n"rigs"'), 5, 'log.level'],
  ])('names the line and the place of %s', async (_what, text, line, path) => {
    expect(await problemsIn(text)).toEqual([expect.objectContaining({ line, path })]);
  });

  it('refuses two rigs that are the same board', async () => {
    const port = '{ "productId": "7523", "vendorId": "1a86" }';
    const twice = GOOD.replace('"/dev/ttyUSB0"', port).replace(
      '"/dev/ttyUSB1"',
      port.replace('1a86', '1A86'),
    );
    expect(await problemsIn(twice)).toEqual([expect.objectContaining({ line: 7, path: 'rigs.1.port' })]);
  });

  it.each([
    ['http://127.0.0.1:3000', true],
    ['http://localhost:3000', true],
    ['http://[::1]:3000', true],
    ['https://workshop.example', true],
    ['http://workshop.example', false],
    ['http://192.168.1.10:3000', false],
    ['http://127.0.0.1.example', false],
    ['http://localhost.example', false],
  ])('lets a token travel to %s: %s', async (server, taken) => {
    const text = GOOD.replace('http://127.0.0.1:3000/', server);
    if (taken) expect((await loadConfig(await fileWith(text))).server).toBe(server);
    else expect(await problemsIn(text)).toEqual([expect.objectContaining({ line: 2, path: 'server' })]);
    const told = text.replace('"rigs"', '"allowUnencrypted": true,\n"rigs"');
    expect((await loadConfig(await fileWith(told))).server).toBe(server);
  });

  it.each([
    ['a missing comma', GOOD.replace('"state",', '"state"'), 4],
    ['an open quote', GOOD.replace('"state",', '"state,'), 3],
    ['a comma too many', GOOD.replace('USB1" }', 'USB1" },'), 8],
    ['a file that ends early', GOOD.slice(0, GOOD.indexOf('"rigs"')), 4],
    ['text behind the end', `${GOOD}\n}`, 10],
  ])('names the line of %s', async (_what, text, line) => {
    expect(await problemsIn(text)).toEqual([expect.objectContaining({ line, path: '' })]);
  });

  it('says so when the file is not there', async () => {
    const error: unknown = await loadConfig(join(tmpdir(), 'no-such-folder', 'agent.json')).catch(
      (cause: unknown) => cause,
    );
    expect(error).toBeInstanceOf(ConfigError);
  });
});

describe('JSON with its lines', () => {
  it('reads every JSON text as JSON.parse does', () => {
    fc.assert(
      fc.property(fc.jsonValue(), fc.constantFrom(0, 2), (value, indent) => {
        const text = JSON.stringify(value, null, indent);
        expect(parseLocatedJson(text).value).toEqual(JSON.parse(text));
      }),
    );
  });

  it('refuses every text that JSON.parse refuses, and nothing else', () => {
    const mutilated = fc
      .tuple(fc.jsonValue(), fc.nat(), fc.constantFrom('', ',', '"', '}', ']', ':', 'x', ' '))
      .map(([value, at, put]) => {
        const text = JSON.stringify(value, null, 1);
        const position = at % (text.length + 1);
        return text.slice(0, position) + put + text.slice(position + 1);
      });
    fc.assert(
      fc.property(mutilated, (text) => {
        const refused = (read: () => unknown) => {
          try {
            read();
            return null;
          } catch (cause) {
            return cause;
          }
        };
        const problem = refused(() => parseLocatedJson(text));
        expect(problem !== null).toBe(refused(() => JSON.parse(text)) !== null);
        if (problem !== null) expect(problem).toBeInstanceOf(JsonProblem);
      }),
      { numRuns: 500 },
    );
  });
});
