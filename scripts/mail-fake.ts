import { createWriteStream } from 'node:fs';
import { mkdir, rename } from 'node:fs/promises';
import { join } from 'node:path';
import { pipeline } from 'node:stream/promises';
import { SMTPServer, type SMTPServerDataStream } from 'smtp-server';
import { z } from 'zod';
import { parseEnv } from '@/lib/env/read';

/** Takes every mail on 127.0.0.1 and stores it as one .eml file; sends none on. */
const { port, folder } = parseEnv(
  z
    .object({ ELLWAND_MAIL_PORT: z.coerce.number().int(), ELLWAND_MAIL_DIR: z.string().min(1) })
    .transform((env) => ({ port: env.ELLWAND_MAIL_PORT, folder: env.ELLWAND_MAIL_DIR })),
  process.env,
);
const LARGEST_BYTES = 5_000_000;
let count = 0;

async function store(stream: SMTPServerDataStream): Promise<void> {
  count += 1;
  const name = `${new Date().toISOString().replaceAll(':', '-')}-${process.pid}-${count}.eml`;
  const draft = join(folder, `.${name}`);
  await pipeline(stream, createWriteStream(draft, { mode: 0o600 }));
  // Renamed at the end: whoever watches the folder never reads half a mail.
  await rename(draft, join(folder, name));
}

await mkdir(folder, { recursive: true });
const server = new SMTPServer({
  disabledCommands: ['AUTH', 'STARTTLS'],
  size: LARGEST_BYTES,
  onData: (stream, _session, done) => {
    store(stream).then(() => done(), done);
  },
});
server.on('error', (error) => console.error(error));
server.listen(port, '127.0.0.1', () => console.log(`Mails are stored in ${folder}`));

for (const signal of ['SIGINT', 'SIGTERM'] as const) {
  process.on(signal, () => server.close(() => process.exit(0)));
}
