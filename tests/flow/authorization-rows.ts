/**
 * Who may do what, one line for each way into the product. authorization.test.ts reads the ways from src/routes and
 * fails, naming it, for one that has no line here, and for a line whose way is gone.
 *
 * A key is a method and a route as its folder is called, for a form's action with `?/name` behind (a default action is
 * the bare POST). A line says:
 *
 * - `may`, the lowest role of the object's own team that gets through: 'reader', 'chemist', 'modeler', 'lead'. Everybody
 *   below gets 403, people of another team 404 (or only their own things), who is not signed in the sign-in page, and who
 *   lacks what the team requires of sign-ins is led to the page that says so. Other words for `may`:
 *     'public'    everybody, signed in or not
 *     'account'   everybody who is signed in, whatever their team requires: it is their own account
 *     'member'    as 'account', but not who lacks what their team requires
 *     'author'    the chemist who made the object, and leads
 *     'maker'     the chemist who made the object, and nobody else: drafts, own notes, own tokens
 *     'operator'  nobody of a team: all get 403 or 404
 *     'elsewhere' not here: it is open to machines or to development only, with a test of its own
 * - `form`, what an allowed person would send: fields, or a function of the place (see tests/support/place.ts) for ids
 * - `foreign`, where people of another team do not get 404: 'own' when they get their own things, with nothing of ours
 * - `fresh`, true where a sign-in that is stale is asked once more who is there (`requireFresh`)
 * - `query`, behind the address; `body` for what is no form, or a function of the place
 * - `shared`, true where the place must have answers
 * - for /api/v1 `scope`, what a token must have
 *
 * Parts of a route in brackets are filled from the place: see `fill` in the test.
 */
import type { ApiScope } from '$lib/domain/api';
import type { Place } from '../support/place';

export interface Row {
  readonly may:
    | 'public'
    | 'account'
    | 'member'
    | 'reader'
    | 'chemist'
    | 'modeler'
    | 'lead'
    | 'author'
    | 'maker'
    | 'operator'
    | 'elsewhere';
  readonly form?: Record<string, string> | ((place: Place) => Record<string, string>);
  readonly foreign?: 'own';
  readonly fresh?: true;
  /** Asked of a place that has answers, which all share: what it changes does no harm there. */
  readonly shared?: true;
  readonly query?: string | ((place: Place) => string);
  readonly body?: object | string | ((place: Place) => object);
  readonly scope?: ApiScope;
}

const own = 'own' as const;
const fresh = true as const;
const limits = { queuedTasks: '100', atoms: '100', megabytes: '100', months: '12' };
const webhook = ({ webhookId }: Place) => ({ webhook: webhookId });
/** A public address, never written to: the place's webhook is off, and no worker runs. */
const newWebhook = { name: 'Another', url: 'https://9.9.9.9/hook' };
const note = ({ noteId }: Place) => ({ note: noteId });
/** The form of a plan, as it is when nothing but conformers is ticked. */
const plan = { conformers: 'on', effort: 'quick', window: '6', temperature: '298.15' };
const submission = {
  name: 'By a program',
  molecules: [{ molecule: { smiles: 'CCC' } }],
  plan: { conformers: {} },
};

export const rows: Record<string, Row> = {
  // Pages for everybody
  'GET /(public)': { may: 'public' },
  'GET /(public)/interface': { may: 'public' },
  'GET /(public)/sign-in': { may: 'public' },
  'POST /(public)/sign-in?/signIn': { may: 'public', form: { email: 'a@people.example' } },
  'POST /(public)/sign-in?/resend': { may: 'public', form: { email: 'a@people.example' } },
  'GET /(public)/sign-in/code': { may: 'public' },
  'POST /(public)/sign-in/code': { may: 'public', form: { code: '000000' } },
  'GET /(public)/sign-in/sso': { may: 'public' },
  'GET /(public)/sign-in/arrived': { may: 'public' },
  'GET /(public)/signed-out': { may: 'public' },
  'GET /(public)/sign-up': { may: 'public' },
  'POST /(public)/sign-up': { may: 'public' },
  'GET /(public)/forgot': { may: 'public' },
  'POST /(public)/forgot': { may: 'public' },
  'GET /(public)/reset': { may: 'public' },
  'POST /(public)/reset': { may: 'public' },
  'GET /(public)/confirm': { may: 'public' },
  'POST /(public)/confirm': { may: 'public' },
  'GET /(public)/invitation': { may: 'public' },
  'POST /(public)/invitation?/accept': { may: 'account' },
  'POST /(public)/invitation?/join': { may: 'public' },
  'GET /(public)/shared/[token]': { may: 'public' },
  'POST /(public)/shared/[token]': { may: 'public', form: { password: 'whatever it is' } },
  'GET /(public)/shared/[token]/bundle': { may: 'public' },
  'POST /sign-out': { may: 'public' },
  'GET /healthz': { may: 'public' },
  'GET /readyz': { may: 'public' },
  'GET /development/letters': { may: 'elsewhere' },

  // One's own account
  'GET /(app)/account': { may: 'account' },
  'POST /(app)/account?/rename': { may: 'account', form: { name: 'Another Name' } },
  'POST /(app)/account?/changePassword': { may: 'account', fresh },
  'POST /(app)/account?/revoke': {
    may: 'maker',
    form: ({ sessionId }) => ({ session: sessionId }),
  },
  'POST /(app)/account?/revokeOthers': { may: 'account' },
  'POST /(app)/account?/chooseLetters': { may: 'account', form: { choice: 'off' } },
  'GET /(app)/account/second-factor': { may: 'account', fresh },
  'POST /(app)/account/second-factor?/switchOn': { may: 'account', fresh },
  'POST /(app)/account/second-factor?/renew': { may: 'account', fresh },
  'POST /(app)/account/second-factor?/switchOff': { may: 'account', fresh },
  'GET /(app)/account/tokens': { may: 'reader', foreign: own },
  'POST /(app)/account/tokens?/create': {
    may: 'reader',
    foreign: own,
    fresh,
    form: { name: 'nightly', scope: 'read', days: '7' },
  },
  'POST /(app)/account/tokens?/revoke': {
    may: 'maker',
    form: ({ tokenId }) => ({ token: tokenId }),
  },
  'GET /(app)/again': { may: 'account' },
  'POST /(app)/again': { may: 'account' },
  'GET /(app)/required': { may: 'account' },
  'POST /(app)/reading': { may: 'account', form: { unit: 'kJ/mol', page: '/desk' } },
  'POST /choose-team': { may: 'elsewhere' },

  // The team
  'GET /(app)/desk': { may: 'member', foreign: own },
  'POST /(app)/desk?/discard': { may: 'maker', form: ({ draftId }) => ({ draft: draftId }) },
  'GET /(app)/team': { may: 'reader', foreign: own },
  'POST /(app)/team?/invite': {
    may: 'lead',
    foreign: own,
    form: { email: 'new@people.example', role: 'reader' },
  },
  'POST /(app)/team?/withdraw': {
    may: 'lead',
    form: ({ invitationId }) => ({ invitation: invitationId }),
  },
  'POST /(app)/team?/changeRole': {
    may: 'lead',
    fresh,
    form: ({ people }) => ({ member: people.reader.userId, role: 'chemist' }),
  },
  'POST /(app)/team?/remove': {
    may: 'lead',
    fresh,
    form: ({ people }) => ({ member: people.reader.userId }),
  },
  'POST /(app)/team?/handOver': {
    may: 'lead',
    fresh,
    form: ({ people }) => ({ member: people.modeler.userId }),
  },
  'POST /(app)/team?/leave': { may: 'reader', foreign: own },
  'POST /(app)/team?/rename': { may: 'lead', foreign: own, form: { name: 'Another team name' } },
  'POST /(app)/team?/open': { may: 'member', foreign: own, form: { name: 'A new team' } },
  'GET /(app)/team/record': { may: 'lead', foreign: own },
  'GET /(app)/team/record/record.csv': { may: 'lead', foreign: own },
  'GET /(app)/team/signing-in': { may: 'lead', foreign: own },
  'POST /(app)/team/signing-in': { may: 'lead', foreign: own, fresh },
  'GET /(app)/team/limits': { may: 'reader', foreign: own },
  'POST /(app)/team/limits?/team': { may: 'lead', foreign: own, form: limits },
  'POST /(app)/team/limits?/member': {
    may: 'lead',
    form: ({ people }) => ({ ...limits, member: people.reader.userId }),
  },
  'GET /(app)/team/end': { may: 'lead', foreign: own },
  'GET /(app)/team/end/everything.zip': { may: 'lead', foreign: own, fresh },
  'POST /(app)/team/end?/ask': { may: 'lead', foreign: own, fresh, form: { name: 'not its name' } },
  'POST /(app)/team/end?/undo': { may: 'lead', foreign: own },
  'GET /(app)/team/webhooks': { may: 'lead', foreign: own },
  'POST /(app)/team/webhooks?/create': { may: 'lead', foreign: own, fresh, form: newWebhook },
  'POST /(app)/team/webhooks?/renew': { may: 'lead', fresh, form: webhook },
  'POST /(app)/team/webhooks?/switch': {
    may: 'lead',
    form: (place) => ({ ...webhook(place), on: 'no' }),
  },
  'POST /(app)/team/webhooks?/remove': { may: 'lead', form: webhook },
  'GET /(app)/team/webhooks/[id]': { may: 'lead' },
  'POST /(app)/team/webhooks/[id]?/test': { may: 'lead' },
  'POST /(app)/team/webhooks/[id]?/again': {
    may: 'lead',
    form: ({ deliveryId }) => ({ delivery: deliveryId }),
  },

  // Who operates the product
  'GET /(operator)/operator': { may: 'operator' },
  'POST /(operator)/operator?/order': { may: 'operator', form: { worker: 'one', order: 'pause' } },
  'POST /(operator)/operator?/requeueReason': { may: 'operator', form: { reason: 'internal' } },
  'POST /(operator)/operator?/requeueTask': {
    may: 'operator',
    form: ({ batchId }) => ({ task: batchId }),
  },
  'GET /metrics': { may: 'elsewhere' },

  // Work
  'GET /(app)/queue': { may: 'reader', foreign: own },
  'GET /(app)/notes': { may: 'reader', foreign: own, query: 'show=open' },
  'GET /(app)/search': { may: 'reader', foreign: own, query: 'text=heron' },
  'GET /(app)/compare': {
    may: 'reader',
    foreign: own,
    query: ({ moleculeId }) => `molecule=${moleculeId}`,
  },
  'GET /(app)/compare/table.csv': { may: 'reader', foreign: own },
  'GET /(app)/batches': { may: 'reader', foreign: own },
  'GET /(app)/batches/new': { may: 'chemist', foreign: own },
  'POST /(app)/batches/new': {
    may: 'chemist',
    foreign: own,
    form: { name: 'Pasted', text: 'CCO ethanol' },
  },
  'POST /(app)/batches/drafts': {
    may: 'chemist',
    foreign: own,
    query: 'name=Up&source=upload&format=smi',
    body: 'CCO ethanol',
  },
  'GET /(app)/batches/[id]': { may: 'reader' },
  'POST /(app)/batches/[id]?/cancel': { may: 'modeler' },
  'POST /(app)/batches/[id]?/pin': { may: 'modeler' },
  'POST /(app)/batches/[id]?/unpin': { may: 'modeler' },
  'POST /(app)/batches/[id]?/rerun': { may: 'modeler' },
  'GET /(app)/batches/[id]/bundle': { may: 'reader' },
  'GET /(app)/batches/[id]/events': { may: 'reader' },
  'GET /(app)/batches/[id]/progress': { may: 'reader' },
  'GET /(app)/batches/[id]/series': { may: 'reader' },
  'GET /(app)/batches/[id]/series.csv': { may: 'reader' },
  'GET /(app)/batches/[id]/preview': { may: 'maker' },
  'POST /(app)/batches/[id]/preview?/submit': { may: 'maker', form: plan },
  'POST /(app)/batches/[id]/preview?/choose': {
    may: 'maker',
    form: ({ draftRowId }) => ({ row: draftRowId, purpose: 'scan', bonds: '[[1,2]]' }),
  },
  'POST /(app)/batches/[id]/preview?/discard': { may: 'maker' },
  'POST /(app)/batches/[id]/preview/estimate': { may: 'maker', form: plan },
  'GET /(app)/molecules/[id]': { may: 'reader' },
  'POST /(app)/molecules/[id]?/opinion': {
    may: 'chemist',
    shared: true,
    form: ({ scanId }) => ({ result: scanId, depth: 'quick' }),
  },
  'POST /(app)/molecules/[id]?/ranking': {
    may: 'chemist',
    shared: true,
    form: ({ resultId }) => ({ result: resultId, depth: 'energies', window: '6' }),
  },
  'POST /(app)/molecules/[id]?/heat': { may: 'chemist' },
  'POST /(app)/molecules/[id]?/cancelTask': {
    may: 'modeler',
    form: ({ batchId, taskId }) => ({ batch: batchId, task: taskId }),
  },
  'GET /(app)/molecules/[id]/program-tasks': { may: 'reader' },
  'GET /(app)/molecules/[id]/bundle': { may: 'reader' },
  'GET /(app)/molecules/[id]/report': { may: 'reader' },
  'GET /(app)/molecules/[id]/drawing': { may: 'reader' },
  'GET /(app)/molecules/[id]/drawing.svg': { may: 'reader' },
  'GET /(app)/molecules/[id]/conformers.sdf': {
    may: 'reader',
    query: ({ resultId }) => `result=${resultId}`,
  },
  'GET /(app)/molecules/[id]/geometries/[result]': { may: 'reader' },
  'GET /(app)/molecules/[id]/geometries/[result]/packed': { may: 'reader' },
  'GET /(app)/molecules/[id]/notes': { may: 'reader' },
  'GET /(app)/molecules/[id]/notes/board': { may: 'reader' },
  'GET /(app)/molecules/[id]/notes/events': { may: 'reader' },
  'POST /(app)/molecules/[id]/notes?/write': {
    may: 'chemist',
    form: { text: 'A remark', subject: 'molecule', parent: '' },
  },
  'POST /(app)/molecules/[id]/notes?/edit': {
    may: 'maker',
    form: (place) => ({ ...note(place), text: 'Another' }),
  },
  'POST /(app)/molecules/[id]/notes?/remove': { may: 'author', form: note },
  'POST /(app)/molecules/[id]/notes?/resolve': {
    may: 'chemist',
    form: (place) => ({ ...note(place), resolved: 'true' }),
  },
  'GET /(app)/links': {
    may: 'modeler',
    query: ({ batchId }) => `share=batch:${batchId}`,
  },
  'POST /(app)/links?/create': {
    may: 'modeler',
    form: ({ batchId }) => ({ subject: `batch:${batchId}`, days: '7', password: '' }),
  },
  'POST /(app)/links?/revoke': {
    may: 'modeler',
    foreign: own,
    form: ({ linkId }) => ({ link: linkId }),
  },

  // The REST interface, by tokens only
  'fallback /api/[...rest]': { may: 'elsewhere' },
  'GET /api/v1/openapi.json': { may: 'public' },
  'GET /api/v1/me': { may: 'reader', foreign: own, scope: 'read' },
  'GET /api/v1/batches': { may: 'reader', foreign: own, scope: 'read' },
  'POST /api/v1/batches': { may: 'chemist', foreign: own, scope: 'submit', body: submission },
  'GET /api/v1/batches/[id]': { may: 'reader', scope: 'read' },
  'GET /api/v1/batches/[id]/rows': { may: 'reader', scope: 'read' },
  'GET /api/v1/batches/[id]/bundle': { may: 'reader', scope: 'read' },
  'POST /api/v1/batches/[id]/cancel': { may: 'modeler', scope: 'submit' },
  'POST /api/v1/batches/[id]/rerun': { may: 'modeler', scope: 'submit' },
  'GET /api/v1/molecules/[id]': { may: 'reader', scope: 'read' },
  'GET /api/v1/molecules/[id]/bundle': { may: 'reader', scope: 'read' },
  'GET /api/v1/molecules/[id]/results/[result]': { may: 'reader', scope: 'read' },
  'POST /api/v1/molecules/[id]/opinions': {
    may: 'chemist',
    scope: 'submit',
    shared: true,
    body: ({ scanId }) => ({ result: scanId, depth: 'quick' }),
  },
  'GET /api/v1/webhooks': { may: 'lead', foreign: own, scope: 'webhooks' },
  'POST /api/v1/webhooks': { may: 'lead', foreign: own, scope: 'webhooks', body: newWebhook },
  'DELETE /api/v1/webhooks/[id]': { may: 'lead', scope: 'webhooks' },
  'POST /api/v1/webhooks/[id]/test': { may: 'lead', scope: 'webhooks' },
  'GET /api/v1/webhooks/[id]/deliveries': { may: 'lead', scope: 'webhooks' },
};
