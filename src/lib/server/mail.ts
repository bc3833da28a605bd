/** Hands letters to the mail server. */
import { createTransport } from 'nodemailer';
import { setTimeout as wait } from 'node:timers/promises';
import { environment } from './environment';
import { log } from './log';
import { countLetter } from './metrics';

export interface Letter {
  readonly subject: string;
  readonly text: string;
  readonly html: string;
}

/** Waits before each try, seconds: a mail server that restarts is met again. */
const TRIES = [0, 2, 10, 60];

const transport = createTransport(environment.WINDLASS_SMTP_URL, {
  from: environment.WINDLASS_MAIL_FROM,
});

const onTheWay = new Set<Promise<void>>();

async function deliver(to: string, letter: Letter): Promise<void> {
  for (const seconds of TRIES) {
    await wait(seconds * 1000, undefined, { ref: false });
    try {
      await transport.sendMail({ to, ...letter });
      countLetter('handed in');
      return;
    } catch (error) {
      log.warn({ error, subject: letter.subject }, 'A letter could not be handed in');
    }
  }
  countLetter('given up');
  log.error({ subject: letter.subject }, 'A letter was given up');
}

/** Sends a letter without making the caller wait: how long an answer takes must not tell whether a letter went out. */
export function post(to: string, letter: Letter): void {
  const delivery = deliver(to, letter).finally(() => onTheWay.delete(delivery));
  onTheWay.add(delivery);
}

/** Waits for the letters that are on their way, and closes the connection to the mail server. */
export async function closeMail(): Promise<void> {
  await Promise.race([Promise.allSettled([...onTheWay]), wait(2_000)]);
  transport.close();
}
