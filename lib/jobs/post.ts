import { createTransport } from 'nodemailer';

export interface Mail {
  to: string;
  subject: string;
  text: string;
}

/** Where mail is handed over. */
export interface Post {
  send(mail: Mail): Promise<void>;
  close(): void;
}

const TIMEOUT_MS = 10_000;

/** Opens the way to the mail server at `smtpUrl`; nothing is said to it before the first mail. */
export function openPost(smtpUrl: string, from: string): Post {
  const address = new URL(smtpUrl);
  const transport = createTransport({
    host: address.hostname,
    port: Number(address.port || 25),
    secure: address.protocol === 'smtps:',
    auth: address.username
      ? { user: decodeURIComponent(address.username), pass: decodeURIComponent(address.password) }
      : undefined,
    connectionTimeout: TIMEOUT_MS,
    greetingTimeout: TIMEOUT_MS,
    socketTimeout: TIMEOUT_MS,
  });
  return {
    async send(mail) {
      await transport.sendMail({ from, ...mail });
    },
    close() {
      transport.close();
    },
  };
}
