import type { Role } from '@/lib/fleet/rights';
import type { PersonActor, ServiceContext } from '@/lib/services/context';

/** Each service is called in the name of the person whose work it is. */
export type DemoContexts = Record<Role, ServiceContext<PersonActor>>;
