/** Takes letters in development and in tests: SMTP on loopback, and what came in as JSON over HTTP. Nothing is delivered. */
import { createServer } from 'node:http';
import { simpleParser } from 'mailparser';
import { SMTPServer } from 'smtp-server';

const MOST_LETTERS = 200;

function asJson({ id, mail }) {
  return {
    id,
    at: mail.date ?? new Date(),
    from: mail.from?.text ?? '',
    to: [mail.to ?? []]
      .flat()
      .map((address) => address.text)
      .join(', '),
    subject: mail.subject ?? '',
    text: mail.text ?? '',
    html: mail.html || '',
  };
}

function listen(server, port) {
  return new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(port, '127.0.0.1', resolve);
  });
}

/**
 * Starts the catcher. GET /letters answers all letters, newest first.
 * @param {{ smtpPort: number, httpPort: number }} ports
 * @returns {Promise<{ smtpUrl: string, lettersUrl: string, stop: () => Promise<void> }>}
 */
export async function startMailCatcher({ smtpPort, httpPort }) {
  let letters = [];
  let count = 0;
  const smtp = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    logger: false,
    onData(stream, session, done) {
      simpleParser(stream).then((mail) => {
        count += 1;
        letters = [{ id: count, mail }, ...letters].slice(0, MOST_LETTERS);
        done();
      }, done);
    },
  });
  smtp.on('error', () => undefined);
  const host = `127.0.0.1:${httpPort}`;
  const http = createServer((request, response) => {
    // A page of another site must not read letters through a name that it points at this machine.
    const isKnown = request.headers.host === host && request.url === '/letters';
    response.writeHead(isKnown ? 200 : 404, { 'content-type': 'application/json' });
    response.end(JSON.stringify(isKnown ? letters.map(asJson) : { message: 'Not found' }));
  });
  await Promise.all([listen(smtp.server, smtpPort), listen(http, httpPort)]);
  return {
    smtpUrl: `smtp://127.0.0.1:${smtpPort}`,
    lettersUrl: `http://${host}/letters`,
    stop: async () => {
      http.closeAllConnections();
      await Promise.all([
        new Promise((resolve) => http.close(resolve)),
        new Promise((resolve) => smtp.close(resolve)),
      ]);
    },
  };
}
