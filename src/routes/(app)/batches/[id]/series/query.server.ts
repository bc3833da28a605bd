/** What the address says of the order of a series; anything odd falls back to the batch's own order. */
import { z } from 'zod';
import { seriesSorts } from '$lib/domain/series';

const querySchema = z.object({
  sort: z.enum(seriesSorts).catch('position'),
  descending: z.stringbool().catch(false),
  page: z.coerce.number().int().min(1).catch(1),
});

export function readSeriesQuery(url: URL): z.output<typeof querySchema> {
  return querySchema.parse(
    Object.fromEntries(
      ['sort', 'descending', 'page'].map((name) => [name, url.searchParams.get(name)]),
    ),
  );
}
