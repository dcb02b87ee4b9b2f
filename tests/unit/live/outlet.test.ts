import { describe, expect, it } from 'vitest';
import { Outlet } from '@/lib/live/outlet';

async function readAll(body: ReadableStream<Uint8Array>): Promise<string> {
  return new Response(body).text();
}

describe('an outlet', () => {
  it('hands what was written to the reader in order, and ends when it is closed', async () => {
    const outlet = new Outlet();
    outlet.write('one ');
    outlet.write('two');
    outlet.close();
    expect(await readAll(outlet.body)).toBe('one two');
  });

  it('lets a reader go that falls 256 chunks behind, instead of keeping ever more for it', async () => {
    const outlet = new Outlet();
    let closed = 0;
    outlet.whenClosed(() => (closed += 1));
    for (let count = 0; count < 1_000; count += 1) outlet.write('x');
    expect(outlet.closed).toBe(true);
    expect(closed).toBe(1);
    expect(await readAll(outlet.body)).toHaveLength(256);
  });

  it('tells once that it is closed, whoever ends it, and takes nothing more', async () => {
    const outlet = new Outlet();
    const heard: string[] = [];
    outlet.whenClosed(() => heard.push('closed'));
    await outlet.body.cancel();
    outlet.close();
    outlet.write('late');
    outlet.whenClosed(() => heard.push('closed already'));
    expect(heard).toEqual(['closed', 'closed already']);
  });
});
