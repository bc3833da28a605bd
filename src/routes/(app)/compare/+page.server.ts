import { redirect } from '@sveltejs/kit';
import { comparisonQuery, MOST_PROFILES, readComparison } from '$lib/domain/comparison';
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
  const choices = await listProfiles(member, [...named, ...found.map(({ id }) => id)]);
  const known = view.picks.filter(({ profile }) => profiles.some(({ id }) => id === profile));
  const only =
    named.length > 0 && choices[0]?.profiles.length === 1 ? choices[0].profiles[0] : null;
  if (only && known.length < MOST_PROFILES) {
    // There is nothing to choose: who asked for the molecule sees its one profile at once.
    const others = known.filter(({ profile }) => profile !== only.id);
    const picks = [...others, { profile: only.id, mirrored: false, shift: 0 }];
    redirect(303, `/compare?${comparisonQuery({ ...view, picks })}`);
  }
  return {
    view: { ...view, picks: known },
    leftOut: view.picks.length - known.length,
    profiles,
    find,
    choices,
    hasLooked: chosen !== null || find !== '',
  };
};
