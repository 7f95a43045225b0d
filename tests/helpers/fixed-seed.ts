import fc from 'fast-check';

/** Property tests draw the same cases everywhere, so that a change is judged by what it changes. DOWNREACH_SEED draws others. */
fc.configureGlobal({ seed: Number(process.env.DOWNREACH_SEED ?? 20_310_512) });
