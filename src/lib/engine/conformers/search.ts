/** The conformer search: seeds, systematic turns, then kicks from what is low already, until nothing new comes. */
import type { Control } from '../control';
import { InputError } from '../errors';
import type { ForceField } from '../forcefield/forcefield';
import type { Molecule } from '../molecule/molecule';
import { symmetryClasses } from '../molecule/symmetry-classes';
import { createRandom } from '../random';
import type { Random } from '../random';
import type { ConformerSearchOptions, ConformerSearchResult, SearchEnd } from './conformers';
import { collectCoreShapes } from './core-shapes';
import type { CoreShapes } from './core-shapes';
import type { SearchPlan } from './effort';
import { planSearch } from './effort';
import { createEmbedder } from './embed';
import type { Embedder } from './embed';
import { describeConformers, finishMinima } from './finish';
import { embedSoundly, settleConfiguration } from './initial-geometry';
import type { Found, Pool } from './pool';
import { createPool } from './pool';
import type { ShapeMoves } from './shape-moves';
import { driveNear, findShapeMoves, kick } from './shape-moves';
import { combination, countCombinations, spreadCombination } from './systematic';
import { createTrial } from './trial';
import type { Trial } from './trial';
import { visibleGraph } from './visible-graph';

const NO_MINIMUM = 'No energy minimum with the configuration given could be reached.';

/** All that the stages of one search share. */
interface Search {
  readonly molecule: Molecule;
  readonly moves: ShapeMoves;
  readonly plan: SearchPlan;
  readonly embedder: Embedder;
  readonly pool: Pool;
  readonly trial: Trial;
  readonly cores: CoreShapes;
  readonly random: Random;
}

/**
 * Searches the conformers of a molecule within `options.window` of the lowest: every one a minimum with the molecule's
 * configuration, all different, lowest first. Deterministic for a seed as long as no time budget ends it. Throws
 * InputError 'no-conformer' where no geometry with the configuration can be built or minimized.
 */
export async function searchConformers(
  forceField: ForceField,
  options: ConformerSearchOptions,
  control: Control,
): Promise<ConformerSearchResult> {
  const random = createRandom(options.seed);
  const molecule = await settleConfiguration(forceField.molecule, control);
  const classes = symmetryClasses(molecule);
  const graph = visibleGraph(molecule, classes);
  const moves = findShapeMoves(molecule, classes);
  const pool = createPool(graph, options.limit, options.window);
  const search: Search = {
    molecule,
    moves,
    plan: planSearch(moves, options.effort),
    embedder: createEmbedder(molecule),
    pool,
    trial: createTrial(forceField, molecule, pool),
    cores: collectCoreShapes(molecule, moves),
    random,
  };
  await collectSeeds(search, control.part(0, 0.15));
  if (pool.found.length === 0) throw new InputError('no-conformer', NO_MINIMUM);
  await turnSystematically(search, control.part(0.15, 0.5));
  const ended = await kickUntilStable(search, control.part(0.5, 0.9));
  const last = control.part(0.9, 1);
  // Proving a minimum takes about three times as long as a start: time that is over is not overdrawn by much.
  const most = ended === 'budget' ? Math.ceil(search.trial.counts.starts / 20) : Infinity;
  const minima = await finishMinima(forceField, molecule, graph, pool, options, most, last);
  if (minima.length === 0) throw new InputError('no-conformer', NO_MINIMUM);
  const isTruncated = minima.length > options.limit;
  const reason = ended === 'stable' && isTruncated ? 'limit' : ended;
  const kept = minima.slice(0, options.limit);
  return {
    conformers: await describeConformers(molecule, graph, kept, options.temperature, last),
    complete: reason === 'stable',
    ended: reason,
    settled: ended === 'stable',
    counts: search.trial.counts,
  };
}

/** Minimizes a geometry in place and remembers what is new; answers whether the set to be returned has changed. */
async function tryGeometry(search: Search, x: Float64Array, control: Control): Promise<boolean> {
  const { reception, energy } = await search.trial.run(x, control);
  if (reception === 'new' || reception === 'outside') search.cores.add(x, energy);
  return reception === 'new';
}

/**
 * Minimizes the geometry given, where there is one, so that nothing found is above it, and embeddings, from which ring
 * shapes and pyramids come. One minimum must be there whatever the budget.
 */
async function collectSeeds(search: Search, control: Control): Promise<void> {
  const { plan, embedder, random, molecule, pool } = search;
  if (molecule.coordinates) {
    await tryGeometry(search, Float64Array.from(molecule.coordinates), control);
  }
  for (let n = 0; n < plan.embeddings; n++) {
    if (control.expired() && pool.found.length > 0) return;
    control.report(n / plan.embeddings, 'Building first shapes');
    const x = await embedSoundly(molecule, embedder, random, control);
    if (x) await tryGeometry(search, x, control);
  }
}

/** Sets all torsions to all their choices on each ring shape, or to an even sample of them. */
async function turnSystematically(search: Search, control: Control): Promise<void> {
  const { drives } = search.moves;
  const cores = search.cores.list();
  const total = countCombinations(drives);
  if (drives.length === 0) return;
  const isExhaustive = total * cores.length <= search.plan.combinations;
  const count = isExhaustive ? total : Math.ceil(search.plan.samples / cores.length);
  for (let n = 0; n < count; n++) {
    const angles = isExhaustive ? combination(drives, n) : spreadCombination(drives, n);
    for (const { coordinates } of cores) {
      if (control.expired()) return;
      const x = coordinates.slice();
      drives.forEach((drive, d) => driveNear(x, drive, angles[d], search.random));
      await tryGeometry(search, x, control);
    }
    control.report(n / count, 'Turning bonds');
  }
}

/** While conformers were met only once others have likely been missed; then patience lasts this many times as long. */
const LONGEST_PATIENCE = 3;

/** True when a conformer that would be returned was met once only. */
function hasSingles(pool: Pool): boolean {
  const ceiling = pool.ceiling();
  return pool.found.some(({ energy, hits }) => energy <= ceiling && hits === 1);
}

/** Kicks low conformers until the set has not changed for long. */
async function kickUntilStable(search: Search, control: Control): Promise<SearchEnd> {
  const { pool, trial, plan } = search;
  let quiet = 0;
  while (quiet < plan.patience || (quiet < LONGEST_PATIENCE * plan.patience && hasSingles(pool))) {
    if (control.expired()) return 'budget';
    if (trial.counts.starts >= plan.starts) return 'limit';
    const x = await nextGeometry(search, control);
    quiet = (await tryGeometry(search, x, control)) ? 0 : quiet + 1;
    control.report(quiet / plan.patience, 'Kicking low conformers');
  }
  return 'stable';
}

/** Share of fresh embeddings among the kicks where rings are so large that flaps alone mix their shapes slowly. */
const FRESH_SHARE = 0.2;
const LARGE_RING = 8;

/** A kicked conformer, or now and then a new embedding. */
async function nextGeometry(search: Search, control: Control): Promise<Float64Array> {
  const { molecule, embedder, moves, pool, random } = search;
  const hasLargeRing = moves.ringMoves.some(
    ({ arc, rest }) => arc.length + rest.length + 2 >= LARGE_RING,
  );
  if (hasLargeRing && random.uniform() < FRESH_SHARE) {
    const fresh = await embedSoundly(molecule, embedder, random, control);
    if (fresh) return fresh;
  }
  const parent = chooseParent(pool, random);
  parent.uses++;
  const x = parent.coordinates.slice();
  kick(x, moves, random);
  return x;
}

/** Mean energy above the lowest, kcal/mol, of the parents chosen by energy. */
const PARENT_ENERGY = 1.5;

/** In turn the conformer least used and one chosen by energy. */
function chooseParent({ found }: Pool, random: Random): Found {
  if (random.uniform() < 0.5) {
    return found.reduce((best, entry) => (entry.uses < best.uses ? entry : best));
  }
  const height = -PARENT_ENERGY * Math.log(1 - random.uniform());
  let place = 0;
  while (place + 1 < found.length && found[place + 1].energy - found[0].energy <= height) place++;
  return found[random.below(place + 1)];
}
