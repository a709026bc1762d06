import { createTransport, type Transporter } from 'nodemailer';
import { config } from '../config';
import { onShutdown } from '../shutdown';
import { startLocalServer } from './local-server';

/** True while no mail server is configured, so that messages stay in the local mailbox. */
export function usesLocalMailbox(): boolean {
  return config().smtpUrl === null;
}

async function openTransport(): Promise<Transporter> {
  const { smtpUrl } = config();
  const transport =
    smtpUrl === null
      ? createTransport({ host: '127.0.0.1', port: await startLocalServer(), secure: false, ignoreTLS: true })
      : createTransport(smtpUrl);
  onShutdown('work', 'mail', () => transport.close());
  return transport;
}

let opened: Promise<Transporter> | null = null;

/** The connection to the mail server, opened at the first message; a failed opening is tried again at the next. */
export function mailTransport(): Promise<Transporter> {
  opened ??= openTransport().catch((error: unknown) => {
    opened = null;
    throw error;
  });
  return opened;
}
