import type { ServiceContext, SystemActor } from '@/lib/services/context';
import type { Post } from '../post';

/** What a handler is handed. `payload` is as it came out of Redis: the handler parses it by its definition. */
export interface JobCall {
  ctx: ServiceContext<SystemActor>;
  payload: unknown;
  post: Post;
}

export type JobHandler = (call: JobCall) => Promise<void>;
