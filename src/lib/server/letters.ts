/** What the letters say, as plain text and as HTML made from the same lines. */
import type { Role } from '../domain/roles';
import { GIVE_UP_DAYS } from '../domain/webhooks';
import { environment } from './environment';
import { LETTER_HOURS } from './letter-tokens';
import type { Letter } from './mail';

/** How long an invitation is good for. */
export const INVITATION_DAYS = 7;

/** A list in a letter. */
export interface LetterList {
  readonly title: string;
  readonly items: readonly string[];
}

export interface Content {
  readonly subject: string;
  readonly greeting: string;
  readonly lines: readonly string[];
  /** Lists below the lines, each under a heading; one without items is left out. */
  readonly lists?: readonly LetterList[];
  readonly link?: { readonly label: string; readonly path: string };
  readonly closing: string;
  /** How long the letter is worth reading. */
  readonly hours?: number;
}

const escapeHtml = (text: string) =>
  text.replace(/[&<>"']/g, (character) => `&#${character.charCodeAt(0)};`);

const paragraph = (text: string) => `<p style="margin:0 0 16px">${escapeHtml(text)}</p>`;

function listing({ title, items }: LetterList): string {
  const rows = items.map((item) => `<li style="margin:0 0 8px">${escapeHtml(item)}</li>`);
  return `<p style="margin:24px 0 8px;font-weight:600">${escapeHtml(title)}</p>
<ul style="margin:0 0 16px;padding-left:20px">${rows.join('')}</ul>`;
}

function button(label: string, url: string): string {
  const style =
    'display:inline-block;padding:12px 20px;border-radius:6px;background:#0b6e6e;color:#ffffff;text-decoration:none;font-weight:600';
  return `<p style="margin:24px 0"><a href="${escapeHtml(url)}" style="${style}">${escapeHtml(label)}</a></p>`;
}

/** A letter as plain text and as HTML. */
export function compose(content: Content): Letter {
  const { subject, greeting, lines, link, closing, hours: worth } = content;
  const lists = (content.lists ?? []).filter(({ items }) => items.length > 0);
  const url = link ? new URL(link.path, environment.WINDLASS_ORIGIN).href : null;
  const text = [
    greeting,
    ...lines,
    ...lists.map(({ title, items }) => [title, ...items.map((item) => `- ${item}`)].join('\n')),
    ...(url ? [url] : []),
    closing,
    'Windlass',
  ].join('\n\n');
  const html = `<!doctype html>
<html lang="en"><body style="margin:0;padding:32px 16px;background:#faf8f3;color:#16242b;font:16px/1.5 sans-serif">
<div style="max-width:520px;margin:0 auto;padding:32px;background:#ffffff;border:1px solid #d9d5ca;border-radius:8px">
<p style="margin:0 0 24px;color:#0b6e6e;font-weight:600">Windlass</p>
${[greeting, ...lines].map(paragraph).join('\n')}
${lists.map(listing).join('\n')}
${link && url ? button(link.label, url) : ''}
<p style="margin:0;color:#51616a;font-size:14px">${escapeHtml(closing)}</p>
</div></body></html>`;
  return { subject, text, html, hours: worth };
}

const hours = (count: number) => (count === 1 ? 'one hour' : `${count} hours`);

export function confirmAddressLetter(name: string, token: string): Letter {
  return compose({
    subject: 'Confirm your address',
    greeting: `Hello ${name},`,
    lines: [
      'This address was given for a new account on Windlass. Confirm it with the password that you chose, and you are in.',
    ],
    link: { label: 'Confirm my address', path: `/confirm?token=${token}` },
    closing: `The link works once, within ${hours(LETTER_HOURS['confirm-address'])}. If you did not sign up, leave this letter alone: without it the account stays closed.`,
    hours: LETTER_HOURS['confirm-address'],
  });
}

export function alreadyMemberLetter(name: string): Letter {
  return compose({
    subject: 'You have an account already',
    greeting: `Hello ${name},`,
    lines: [
      'Somebody, probably you, tried to sign up on Windlass with this address. It has an account already, so nothing was changed. If you forgot the password, choose a new one.',
    ],
    link: { label: 'Choose a new password', path: '/forgot' },
    closing: 'If this was not you, there is nothing to do.',
  });
}

export function resetPasswordLetter(name: string, token: string): Letter {
  return compose({
    subject: 'Choose a new password',
    greeting: `Hello ${name},`,
    lines: ['A new password was asked for your account on Windlass. Choose it here.'],
    link: { label: 'Choose a new password', path: `/reset?token=${token}` },
    closing: `The link works once, within ${hours(LETTER_HOURS['reset-password'])}. If you did not ask, leave this letter alone: your password stays as it is.`,
    hours: LETTER_HOURS['reset-password'],
  });
}

export function passwordChangedLetter(name: string): Letter {
  return compose({
    subject: 'Your password was changed',
    greeting: `Hello ${name},`,
    lines: [
      'The password of your account on Windlass was changed just now, and its other sign-ins were ended.',
    ],
    link: { label: 'This was not me', path: '/forgot' },
    closing: 'If this was you, there is nothing to do.',
  });
}

/** What every letter about the ways into an account ends with. */
const CHECK_ACCOUNT = { label: 'Look at my account', path: '/account' } as const;
const NOT_ME =
  'If this was not you, choose a new password at once, end the other sign-ins, and look at your second factor.';

export function secondFactorOnLetter(name: string): Letter {
  return compose({
    subject: 'Your second factor is on',
    greeting: `Hello ${name},`,
    lines: [
      'From now on signing in to your account on Windlass also asks for a code of your app. Keep the recovery codes where you find them without your phone.',
    ],
    link: CHECK_ACCOUNT,
    closing: NOT_ME,
  });
}

export function secondFactorOffLetter(name: string): Letter {
  return compose({
    subject: 'Your second factor is off',
    greeting: `Hello ${name},`,
    lines: [
      'Signing in to your account on Windlass no longer asks for a code. Its recovery codes stopped working.',
    ],
    link: CHECK_ACCOUNT,
    closing: NOT_ME,
  });
}

export function recoveryCodeUsedLetter(name: string, left: number): Letter {
  return compose({
    subject: 'A recovery code was used',
    greeting: `Hello ${name},`,
    lines: [
      `A recovery code was used just now in place of a code of your app. ${left === 1 ? 'One is' : `${left} are`} left; you can make new ones.`,
    ],
    link: CHECK_ACCOUNT,
    closing: NOT_ME,
  });
}

export function wrongCodesLetter(name: string): Letter {
  return compose({
    subject: 'Wrong codes were tried',
    greeting: `Hello ${name},`,
    lines: [
      'Somebody gave several wrong codes for the second factor of your account on Windlass. They were refused. Who gets that far knows your password, or signed in as you elsewhere.',
    ],
    link: { label: 'Choose a new password', path: '/forgot' },
    closing: 'If this was you, there is nothing to do.',
  });
}

export function singleSignOnLinkedLetter(name: string, provider: string): Letter {
  return compose({
    subject: 'Your account can be opened another way',
    greeting: `Hello ${name},`,
    lines: [
      `Somebody signed in to Windlass through ${provider}, which says that this address is theirs. From now on your account opens that way, too.`,
    ],
    link: CHECK_ACCOUNT,
    closing: NOT_ME,
  });
}

export function noPasswordLetter(name: string, provider: string): Letter {
  return compose({
    subject: 'Your account has no password',
    greeting: `Hello ${name},`,
    lines: [
      `Somebody, probably you, asked for a new password or a new account on Windlass with this address. Its account has no password: sign in through ${provider}.`,
    ],
    link: { label: 'Sign in', path: '/sign-in' },
    closing: 'If this was not you, there is nothing to do. Nothing was changed.',
  });
}

/** Article and noun of a role: "a chemist". */
const aRole = (role: Role) => `a ${role}`;

export function invitationLetter(given: {
  team: string;
  lead: string;
  role: Role;
  token: string;
}): Letter {
  return compose({
    subject: `Join ${given.team} on Windlass`,
    greeting: 'Hello,',
    lines: [
      `${given.lead} asks you to join the team ${given.team} as ${aRole(given.role)}. On Windlass teams work with the shapes of molecules: conformers, torsions, and what each turn about a bond costs.`,
    ],
    link: { label: 'Look at the invitation', path: `/invitation?token=${given.token}` },
    closing: `The link works once, for this address only, within ${INVITATION_DAYS} days. If you do not know the sender, leave this letter alone.`,
  });
}

export function memberRemovedLetter(name: string, team: string): Letter {
  return compose({
    subject: `You are no longer in ${team}`,
    greeting: `Hello ${name},`,
    lines: [
      `A lead of ${team} took you out of the team. What you submitted there stays with the team; your account and your other teams are as they were.`,
    ],
    link: { label: 'Open Windlass', path: '/desk' },
    closing: 'If this surprises you, ask a lead of the team.',
  });
}

export function webhookGivenUpLetter(
  name: string,
  given: { readonly team: string; readonly webhook: string; readonly reason: string },
): Letter {
  return compose({
    subject: `A webhook of ${given.team} was switched off`,
    greeting: `Hello ${name},`,
    lines: [
      `For ${GIVE_UP_DAYS} days nothing got through to the webhook “${given.webhook}” of ${given.team}, so Windlass switched it off. It hears of no further batches until somebody switches it on again.`,
      `What was wrong the last time: ${given.reason}`,
    ],
    link: { label: 'Look at the webhooks', path: '/team/webhooks' },
    closing: 'You get this letter because you lead the team. Send a test before switching it on.',
  });
}
