/** Groups of packages that whole rooms must not import, as patterns on the import's text. */
import { builtinModules } from 'node:module';

const builtins = builtinModules.filter((name) => !name.startsWith('_') && !name.includes('/'));

export const NODE = new RegExp(`^(node:.*|(${builtins.join('|')})(\\/.*)?)$`);
export const QUEUE = /^(bullmq|ioredis)(\/.*)?$/;
export const DATABASE = /^(pg|pg-.*|drizzle-orm|drizzle-kit)(\/.*)?$/;
export const SERIAL = /^(serialport|@serialport\/.*)(\/.*)?$/;
export const MAIL = /^(nodemailer|smtp-server)(\/.*)?$/;
export const FRAMEWORK = /^(next|next-auth|react|react-dom|@tanstack\/.*)(\/.*)?$/;
