/** How the lines of a comparison are told apart: by dashes first, by color besides. */

const DASHES = ['', '9 5', '2 4', '12 4 2 4', '18 5', '5 3', '12 3 2 3 2 3', '1 7'];
const COLORS = ['tide', 'ember', 'brass', 'moss', 'ink'];

export interface LineLook {
  readonly dash: string;
  readonly color: string;
}

/** The look of the line at a place, from 0. */
export function lineLook(place: number): LineLook {
  return {
    dash: DASHES[place % DASHES.length],
    color: `var(--color-${COLORS[place % COLORS.length]})`,
  };
}
