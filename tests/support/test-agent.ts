import type { Command, CommandAnswer } from '@/lib/protocol/commands';
import { followNews } from '@/lib/services/news/follow-news';
import { answerCommand } from '@/lib/services/traffic/answer-command';
import { takeCommands } from '@/lib/services/traffic/take-commands';
import type { FloorWorld } from '@/tests/support/floor-world';

/** An agent that answers each command as soon as the database tells of it. */
export interface TestAgent {
  /** Every command it was handed, oldest first. */
  taken: Command[];
  /** How it answers; null: not at all. Default: done. */
  answer: (command: Command) => 'done' | { refused: 'command-late' | 'presence-wrong' | 'guard-open' } | null;
  close: () => Promise<void>;
}

export async function startTestAgent(floor: FloorWorld): Promise<TestAgent> {
  const closing = new AbortController();
  const agent: TestAgent = { taken: [], answer: () => 'done', close: async () => undefined };
  const respond = async (command: Command) => {
    agent.taken.push(command);
    const answer = agent.answer(command);
    if (answer === null) return;
    const at = floor.clock.iso();
    const input: CommandAnswer =
      answer === 'done' ? { outcome: 'done', at } : { outcome: 'refused', at, code: answer.refused };
    await answerCommand({ ctx: floor.agent(), commandId: command.id, input });
  };
  let work = Promise.resolve();
  const take = async () => {
    for (const command of await takeCommands({ ctx: floor.agent(), again: false })) await respond(command);
  };
  let following: Promise<void> = Promise.resolve();
  await new Promise<void>((connected, lost) => {
    following = followNews({
      ctx: floor.system(),
      databaseUrl: floor.world.url,
      closing: closing.signal,
      follower: {
        onNews: ({ news }) => {
          if (news === 'command') work = work.then(take);
        },
        onConnected: connected,
        onLost: (cause) => {
          if (!closing.signal.aborted) lost(cause instanceof Error ? cause : new Error('the line was lost'));
        },
      },
    });
  });
  work = work.then(take);
  agent.close = async () => {
    closing.abort();
    await following;
    await work;
  };
  return agent;
}
