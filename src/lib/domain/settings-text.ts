/** The settings of a result in words, and what tells two results of one kind apart. */

type Settings = Readonly<Record<string, unknown>>;

/** How each setting reads; those that name what was turned are left out, because headings name it. */
const wording: Readonly<Record<string, (value: never) => string>> = {
  relaxed: (value: boolean) => (value ? 'relaxed' : 'rigid'),
  step: (value: number) => `every ${value}°`,
  effort: (value: string) => `${value} effort`,
  window: (value: number) => `window ${value} kcal/mol`,
  limit: (value: number) => `at most ${value}`,
  tether: (value: number) => `tether ${value} Å`,
  variant: (value: string) => value,
  dielectric: ({
    constant,
    distanceDependent,
  }: {
    constant: number;
    distanceDependent: boolean;
  }) => (distanceDependent ? `dielectric ${constant} × distance` : `dielectric ${constant}`),
  temperature: (value: number) => `${value} K`,
  seed: (value: number) => `seed ${value}`,
};

/** Each setting as a phrase, in the order in which people ask for them. */
export function settingsPhrases(settings: Settings): string[] {
  return Object.entries(wording).flatMap(([name, say]) =>
    settings[name] === undefined ? [] : [say(settings[name] as never)],
  );
}

/** A day as people write it, in UTC so that server and browser say the same. */
export function dayText(at: Date): string {
  return new Intl.DateTimeFormat('en-GB', {
    day: 'numeric',
    month: 'short',
    year: 'numeric',
    timeZone: 'UTC',
  }).format(at);
}

export interface ToTellApart {
  /** What it answers; only those of the same subject need telling apart. */
  readonly subject: string;
  readonly settings: Settings;
  readonly engineVersion: string;
  readonly createdAt: Date;
}

/**
 * For each result what tells it from the others of its subject: the settings in which they differ, else the version of
 * the engine, and the day. Empty for a result that is alone.
 */
export function distinctions(results: readonly ToTellApart[]): string[] {
  return results.map((result) => {
    const others = results.filter((other) => other.subject === result.subject && other !== result);
    if (others.length === 0) return '';
    const own = settingsPhrases(result.settings);
    const shared = (phrase: string): boolean =>
      others.every((other) => settingsPhrases(other.settings).includes(phrase));
    const differing = own.filter((phrase) => !shared(phrase));
    const isOldVersion = others.some((other) => other.engineVersion !== result.engineVersion);
    return [
      ...differing,
      ...(isOldVersion ? [`version ${result.engineVersion}`] : []),
      dayText(result.createdAt),
    ].join(', ');
  });
}
