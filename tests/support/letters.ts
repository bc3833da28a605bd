/** Reads what the mail catcher of the tests took. */
import { setTimeout as wait } from 'node:timers/promises';

export interface Letter {
  to: string;
  subject: string;
  text: string;
  html: string;
}

const PATIENCE_MS = 10_000;

/** Delivers what waits, where no worker does: set by flow tests, which mostly run without one. */
let deliver: () => Promise<unknown> = () => Promise.resolve();

export function deliverBy(given: () => Promise<unknown>): void {
  deliver = given;
}

async function readLetters(lettersUrl: string): Promise<Letter[]> {
  await deliver();
  const response = await fetch(lettersUrl);
  return (await response.json()) as Letter[];
}

/** All letters to an address, newest first. */
export async function lettersTo(lettersUrl: string, to: string): Promise<Letter[]> {
  return (await readLetters(lettersUrl)).filter((letter) => letter.to.includes(to));
}

/** Waits until so many letters with the subject have come to an address, and answers the newest of them. */
export async function waitForLetter(
  lettersUrl: string,
  to: string,
  subject: string,
  count = 1,
): Promise<Letter> {
  const end = Date.now() + PATIENCE_MS;
  while (Date.now() < end) {
    const found = (await lettersTo(lettersUrl, to)).filter((letter) => letter.subject === subject);
    if (found.length >= count) return found[0]!;
    await wait(50);
  }
  throw new Error(`No letter "${subject}" came to ${to}`);
}

/** The secret in a letter's link. */
export function tokenOf(letter: Letter): string {
  const token = /[?]token=([\w-]+)/.exec(letter.text)?.[1];
  if (!token) throw new Error(`The letter "${letter.subject}" has no link with a secret`);
  return token;
}

/** The link in a letter. */
export function linkOf(letter: Letter): string {
  const link = /https?:\/\/\S+/.exec(letter.text)?.[0];
  if (!link) throw new Error(`The letter "${letter.subject}" has no link`);
  return link;
}
