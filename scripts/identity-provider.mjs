/**
 * An OpenID Connect provider for development and tests, on loopback, with invented people; nobody needs a password. It is
 * never started where the operator named a provider.
 */
import { randomBytes } from 'node:crypto';
import { createServer } from 'node:http';

/** Addresses end in .example, which no mail can ever reach (RFC 2606). Malik Osei also has a password in the demo. */
const people = new Map([
  ['1001', { name: 'Runa Dahl', email: 'runa.dahl@skerry.example', email_verified: true }],
  ['1002', { name: 'Malik Osei', email: 'malik.osei@skerry.example', email_verified: true }],
  ['1003', { name: 'Pia Nowak', email: 'pia.nowak@skerry.example', email_verified: false }],
]);

const escapeHtml = (text) =>
  text.replace(/[&<>"']/g, (character) => `&#${character.charCodeAt(0)};`);

function chooserPage(uid) {
  const rows = [...people].map(
    ([subject, { name, email, email_verified: isVerified }]) =>
      `<p><button name="subject" value="${subject}">${escapeHtml(name)}</button> ${escapeHtml(email)}${isVerified ? '' : ' (address not verified)'}</p>`,
  );
  return `<!doctype html><html lang="en"><title>Choose who you are</title>
<body style="font:16px/1.5 sans-serif;max-width:32rem;margin:3rem auto;padding:0 1rem">
<h1>Choose who you are</h1><p>An identity provider for development. Everybody here is invented.</p>
<form method="post" action="/interaction/${uid}">${rows.join('')}
<p><button name="subject" value="">Cancel</button></p></form></body></html>`;
}

async function readBody(request) {
  const chunks = [];
  for await (const chunk of request) chunks.push(chunk);
  return Buffer.concat(chunks).toString();
}

/** The library warns of an old Node.js, and that keys and sign-ins are gone after a restart, which is as it shall be here. */
async function quietly(task) {
  const { warn } = console;
  console.warn = () => undefined;
  try {
    return await task();
  } finally {
    console.warn = warn;
  }
}

async function makeProvider({ issuer, clientId, clientSecret, returnTo, signedOutTo }) {
  const { Provider, interactionPolicy } = await import('oidc-provider');
  const policy = interactionPolicy.base();
  // The one client is the product itself: nobody has to agree to anything.
  policy.remove('consent');
  return new Provider(issuer, {
    clients: [
      {
        client_id: clientId,
        client_secret: clientSecret,
        redirect_uris: [returnTo],
        post_logout_redirect_uris: [signedOutTo],
      },
    ],
    claims: { openid: ['sub'], profile: ['name'], email: ['email', 'email_verified'] },
    cookies: { keys: [randomBytes(24).toString('hex')] },
    features: { devInteractions: { enabled: false }, rpInitiatedLogout: { enabled: true } },
    interactions: { policy, url: (ctx, { uid }) => `/interaction/${uid}` },
    ttl: { Interaction: 900, Session: 3600, Grant: 3600, AccessToken: 900, IdToken: 900 },
    findAccount: (ctx, subject) => ({
      accountId: subject,
      claims: () => ({ sub: subject, ...people.get(subject) }),
    }),
    async loadExistingGrant(ctx) {
      const grant = new ctx.oidc.provider.Grant({
        clientId: ctx.oidc.client.clientId,
        accountId: ctx.oidc.session.accountId,
      });
      grant.addOIDCScope('openid profile email');
      await grant.save();
      return grant;
    },
  });
}

function listen(server, port) {
  return new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(port, '127.0.0.1', resolve);
  });
}

/** The page that asks who one is, and its answer. */
async function interact(provider, request, response) {
  const { uid } = await provider.interactionDetails(request, response);
  if (request.method !== 'POST') {
    response.writeHead(200, { 'content-type': 'text/html; charset=utf-8' });
    response.end(chooserPage(uid));
    return;
  }
  const subject = new URLSearchParams(await readBody(request)).get('subject') ?? '';
  const result = people.has(subject)
    ? { login: { accountId: subject, amr: ['pwd'] } }
    : { error: 'access_denied', error_description: 'The person does not want to.' };
  await provider.interactionFinished(request, response, result, { mergeWithLastSubmission: false });
}

/**
 * Starts the provider.
 * @param {{ port: number, origin: string }} settings where it listens, and the product's own address
 * @returns {Promise<{ issuer: string, variables: Record<string, string>, stop: () => Promise<void> }>} `variables` are the
 *   product's settings for it
 */
export async function startIdentityProvider({ port, origin }) {
  const issuer = `http://127.0.0.1:${port}`;
  const clientId = 'windlass';
  const clientSecret = randomBytes(24).toString('base64url');
  const provider = await quietly(() =>
    makeProvider({
      issuer,
      clientId,
      clientSecret,
      returnTo: `${origin}/auth/callback/sso`,
      signedOutTo: `${origin}/signed-out`,
    }),
  );
  const answer = provider.callback();
  const server = createServer((request, response) => {
    const isOurs = request.headers.host === `127.0.0.1:${port}`;
    const serve = async () => {
      if (!isOurs) response.writeHead(404).end();
      else if (request.url.startsWith('/interaction/')) await interact(provider, request, response);
      else await answer(request, response);
    };
    serve().catch((error) => {
      if (!response.headersSent) response.writeHead(400, { 'content-type': 'text/plain' });
      response.end(`${error.name}: ${error.message}`);
    });
  });
  await listen(server, port);
  return {
    issuer,
    variables: {
      WINDLASS_OIDC_ISSUER: issuer,
      WINDLASS_OIDC_CLIENT_ID: clientId,
      WINDLASS_OIDC_CLIENT_SECRET: clientSecret,
      WINDLASS_OIDC_NAME: 'Skerry ID',
    },
    stop: () =>
      new Promise((resolve) => {
        server.close(resolve);
        server.closeAllConnections();
      }),
  };
}
