/** One letter to the mail server, over a connection of its own. */
import MailComposer from 'nodemailer/lib/mail-composer/index.js';
import { parseConnectionUrl } from 'nodemailer/lib/shared/index.js';
import SMTPConnection from 'nodemailer/lib/smtp-connection/index.js';
import { Readable } from 'node:stream';
import { environment } from './environment';

/** Longer than a mail server needs for one letter; silence after this counts as a lost connection. */
const SILENCE_MS = 60_000;

export interface Message {
  /** Stays the same however often the letter is tried. */
  readonly id: string;
  readonly to: string;
  readonly subject: string;
  readonly text: string;
  readonly html: string;
}

/** What came of handing a letter in. 'unsure': its body went out, and the connection was lost before the answer. */
export type HandedIn =
  | { readonly outcome: 'sent' }
  | { readonly outcome: 'refused' | 'not now' | 'unsure'; readonly reason: string };

/**
 * Hands a letter in. `begin` is called when the server is ready for the body and not one byte of it has gone out yet;
 * where it throws, nothing is handed in and the error is passed on.
 */
export async function handIn(message: Message, begin: () => Promise<void>): Promise<HandedIn> {
  const mail = new MailComposer({
    from: environment.WINDLASS_MAIL_FROM,
    to: message.to,
    subject: message.subject,
    text: message.text,
    html: message.html,
    messageId: messageId(message.id),
  }).compile();
  const envelope = mail.getEnvelope();
  const bytes = await mail.build();
  let isBegun = false;
  let cannotBegin: unknown = null;
  let isOver = false;
  async function* body(): AsyncGenerator<Buffer> {
    // A refused letter's body is read too, into nothing.
    if (isOver) return;
    try {
      await begin();
    } catch (error) {
      cannotBegin = error;
      throw error;
    }
    isBegun = true;
    yield bytes;
  }
  try {
    await converse(async (connection, fail) => {
      await new Promise<void>((resolve, reject) => {
        fail(reject);
        connection.send(
          { ...envelope, from: envelope.from || '' },
          Readable.from(body()),
          (error) => {
            isOver = true;
            if (error) reject(error);
            else resolve();
          },
        );
      });
    });
    return { outcome: 'sent' };
  } catch (error) {
    if (cannotBegin) throw cannotBegin;
    return judge(error as SMTPConnection.SMTPError, isBegun);
  }
}

/** The name of a letter among all letters of the world, RFC 5322 3.6.4. */
function messageId(id: string): string {
  return `<${id}@${new URL(environment.WINDLASS_ORIGIN).hostname}>`;
}

/** Only what the server says about this letter is final; all else may be the network, or a setting to be mended. */
function judge(error: SMTPConnection.SMTPError, isBegun: boolean): HandedIn {
  const reason = error.response ?? error.message;
  const isAnswer = error.responseCode !== undefined;
  if (isBegun && !(isAnswer && error.command === 'DATA')) return { outcome: 'unsure', reason };
  const isAboutTheLetter = error.command === 'RCPT TO' || error.command === 'DATA';
  const isFinal = isAnswer && isAboutTheLetter && error.responseCode! >= 500;
  return { outcome: isFinal ? 'refused' : 'not now', reason };
}

/** Connects, signs in where the settings say so, and closes again, whatever happens. */
async function converse(
  talk: (
    connection: SMTPConnection,
    fail: (reject: (error: Error) => void) => void,
  ) => Promise<void>,
): Promise<void> {
  const { auth, ...options } = parseConnectionUrl(environment.WINDLASS_SMTP_URL) as ReturnType<
    typeof parseConnectionUrl
  > & { auth?: SMTPConnection.Credentials };
  const connection = new SMTPConnection({
    connectionTimeout: SILENCE_MS,
    greetingTimeout: SILENCE_MS,
    socketTimeout: SILENCE_MS,
    ...options,
  });
  let reject: (error: Error) => void = () => undefined;
  connection.on('error', (error) => reject(error));
  connection.on('end', () => reject(new Error('The mail server closed the connection')));
  const listenWith = (given: typeof reject) => {
    reject = given;
  };
  try {
    await new Promise<void>((resolve, fail) => {
      listenWith(fail);
      connection.connect((error) => (error ? fail(error) : resolve()));
    });
    if (auth) {
      await new Promise<void>((resolve, fail) => {
        listenWith(fail);
        connection.login(auth as never, (error) => (error ? fail(error) : resolve()));
      });
    }
    await talk(connection, listenWith);
    connection.quit();
  } catch (error) {
    connection.close();
    throw error;
  }
}
