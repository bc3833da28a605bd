/** A mail server that can be slow, refuse, or fall silent, for tests of what happens then. */
import { once } from 'node:events';
import type { AddressInfo } from 'node:net';
import { simpleParser } from 'mailparser';
import { SMTPServer } from 'smtp-server';

export interface TakenLetter {
  readonly messageId: string | undefined;
  readonly to: string;
  readonly subject: string;
}

/** Where the server stops a letter: before its body comes, or when it has come. */
type Halt = 'before the body' | 'after the body';

export interface MailServer {
  readonly url: string;
  /** Every letter whose body came whole, also where no answer went back. */
  readonly taken: readonly TakenLetter[];
  /** Clients that wait for an answer that is held back. */
  readonly held: () => number;
  /** From now on letters are held there; null lets those through that wait, and all that come. */
  readonly hold: (halt: Halt | null) => void;
  /** From now on recipients are refused with this code; null takes them again. */
  readonly refuse: (code: number | null) => void;
  readonly stop: () => Promise<void>;
}

export async function startMailServer(port = 0): Promise<MailServer> {
  const taken: TakenLetter[] = [];
  let halt: Halt | null = null;
  let refusal: number | null = null;
  let waiting: (() => void)[] = [];
  const pass = (place: Halt, done: () => void) => {
    if (halt === place) waiting.push(done);
    else done();
  };
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    logger: false,
    onRcptTo(_address, _session, done) {
      if (refusal !== null) {
        done(Object.assign(new Error('no such box'), { responseCode: refusal }));
      } else {
        pass('before the body', () => done());
      }
    },
    onData(stream, session, done) {
      void simpleParser(stream).then((mail) => {
        taken.push({
          messageId: mail.messageId,
          to: session.envelope.rcptTo.map(({ address }) => address).join(),
          subject: mail.subject ?? '',
        });
        pass('after the body', () => done());
        // A body that breaks off is no letter.
      }, done);
    },
  });
  server.on('error', () => undefined);
  server.listen(port, '127.0.0.1');
  await once(server.server, 'listening');
  return {
    url: `smtp://127.0.0.1:${(server.server.address() as AddressInfo).port}`,
    taken,
    held: () => waiting.length,
    hold: (place) => {
      halt = place;
      if (place !== null) return;
      for (const done of waiting) done();
      waiting = [];
    },
    refuse: (code) => {
      refusal = code;
    },
    stop: () => new Promise((resolve) => server.close(() => resolve())),
  };
}
