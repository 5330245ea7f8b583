import fc from 'fast-check';

/**
 * Properties are tried on the same cases in every run, so that a red run means a fault and not bad luck. New cases are
 * looked for on purpose: `FUZZ_SEED=123 npx vitest run --project units tests/analysis`.
 */
fc.configureGlobal({ seed: Number(process.env.FUZZ_SEED ?? 20_261_201) });
