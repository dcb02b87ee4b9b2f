import { QueryClient } from '@tanstack/react-query';
import { expect, it } from 'vitest';
import { later } from '@/lib/queries/later';

const at = (second: string, cut: number) => ({ at: `2026-12-01T08:00:${second}Z`, cut });

it('an answer that is older than what is known is not put in its place', () => {
  expect(later(at('10.000', 7), at('09.999', 6))).toEqual(at('10.000', 7));
});

it.each(['10.000', '10.001'])('an answer of the same moment or later (%s) is', (second) => {
  expect(later(at('10.000', 7), at(second, 8))).toEqual(at(second, 8));
});

it('the first answer is taken as it is', () => {
  expect(later(undefined, at('10.000', 7))).toEqual(at('10.000', 7));
});

// A page once showed 7, 6, 8: the answer with 6 was asked for before the live message with 7 came, and arrived after it.
it('a live message that comes while an answer is on its way stays', async () => {
  const client = new QueryClient();
  const queryKey = ['count'];
  const answer = client.fetchQuery({
    queryKey,
    queryFn: async () => {
      const asked = at('10.000', 6);
      client.setQueryData(queryKey, at('10.500', 7));
      await Promise.resolve();
      return later(client.getQueryData<typeof asked>(queryKey), asked);
    },
  });
  expect(await answer).toEqual(at('10.500', 7));
  expect(client.getQueryData(queryKey)).toEqual(at('10.500', 7));
});
