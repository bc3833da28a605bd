/** The figures by which conjugated bonds of a batch are compared. */

export const seriesFigures = [
  'twist',
  'difference',
  'sCisFraction',
  'planarSCisCost',
  'barrier',
  'meanOverlap',
] as const;
export type SeriesFigure = (typeof seriesFigures)[number];

export const seriesSorts = ['position', 'name', 'kind', ...seriesFigures] as const;
export type SeriesColumn = (typeof seriesSorts)[number];

/** A column of the series: its name in tables for programs, null for those that say what the row is. */
export interface SeriesHeading {
  readonly column: SeriesColumn;
  readonly header: string | null;
}

export const seriesColumns: readonly SeriesHeading[] = [
  { column: 'position', header: null },
  { column: 'name', header: null },
  { column: 'kind', header: null },
  { column: 'twist', header: 'twist_degrees' },
  { column: 'difference', header: 's_cis_minus_s_trans_kcal_per_mol' },
  { column: 'sCisFraction', header: 's_cis_fraction' },
  { column: 'planarSCisCost', header: 'planar_s_cis_cost_kcal_per_mol' },
  { column: 'barrier', header: 'barrier_kcal_per_mol' },
  { column: 'meanOverlap', header: 'mean_overlap' },
];
