import { once } from 'node:events';
import type { AddressInfo } from 'node:net';
import { SMTPServer } from 'smtp-server';

export interface MailServer {
  url: string;
  /** Whole mails, oldest first. */
  mails: string[];
  /** Resolves with the mail at `index`, as soon as it is in. */
  mail: (index: number) => Promise<string>;
  close: () => Promise<void>;
}

/** A mail server of the test's own; on `port` when one is given. */
export async function startMailServer(port = 0): Promise<MailServer> {
  const mails: string[] = [];
  const waiting: (() => void)[] = [];
  const server = new SMTPServer({
    disabledCommands: ['AUTH', 'STARTTLS'],
    onData: (stream, _session, done) => {
      let text = '';
      stream.setEncoding('utf8');
      stream.on('data', (part: string) => {
        text += part;
      });
      stream.on('end', () => {
        mails.push(text);
        done();
        for (const wake of waiting.splice(0)) wake();
      });
    },
  });
  server.on('error', (error) => console.error(error));
  server.listen(port, '127.0.0.1');
  await once(server.server, 'listening');
  const address = server.server.address() as AddressInfo;
  return {
    url: `smtp://127.0.0.1:${address.port}`,
    mails,
    mail: async (index) => {
      for (;;) {
        const mail = mails[index];
        if (mail !== undefined) return mail;
        await new Promise<void>((resolve) => waiting.push(resolve));
      }
    },
    close: () => new Promise((resolve) => server.close(() => resolve())),
  };
}
