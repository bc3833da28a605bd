/**
 * The tables. Times carry their zone, every foreign key says what happens on deletion, and every list that a page
 * shows has an index in the order it is shown in. Nothing is stored twice: counts and states of a batch are read from
 * its tasks.
 */
export * from './people';
export * from './teams';
export * from './molecules';
export * from './results';
export * from './letters';
export * from './notes';
export * from './access';
export * from './webhooks';
export * from './operation';
