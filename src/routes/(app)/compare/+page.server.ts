import { readComparison } from '$lib/domain/comparison';
import { uuidParam } from '$lib/domain/identifiers';
import { readSearch } from '$lib/domain/search';
import { listProfiles, loadProfiles } from '$lib/server/comparison';
import { search } from '$lib/server/search';
import { whoAsks } from '$lib/server/teams';
import type { PageServerLoad } from './$types';

/** Molecules that the picker offers at once. */
const OFFERED = 10;

export const load: PageServerLoad = async ({ locals, url }) => {
  const member = whoAsks(locals);
  const view = readComparison(url.searchParams);
  const find = (url.searchParams.get('find') ?? '').slice(0, 100);
  const chosen = url.searchParams.get('molecule');
  const profiles = await loadProfiles(
    member,
    view.picks.map(({ profile }) => profile),
  );
  const named = chosen !== null ? [uuidParam(chosen)] : [];
  const asked = readSearch(new URLSearchParams({ text: find, in: 'name', kind: 'scan' }));
  const found = find === '' ? [] : (await search(member, asked, OFFERED)).rows;
  const known = view.picks.filter(({ profile }) => profiles.some(({ id }) => id === profile));
  return {
    view: { ...view, picks: known },
    leftOut: view.picks.length - known.length,
    profiles,
    find,
    choices: await listProfiles(member, [...named, ...found.map(({ id }) => id)]),
    hasLooked: chosen !== null || find !== '',
  };
};
