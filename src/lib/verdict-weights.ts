/** How the three words about a difference are marked, wherever they stand. Never by colour. */
export const VERDICT_WEIGHTS = { withinScales: 'empty', lookAgain: 'half', notExplained: 'full' } as const;
