/** npm run endure: the proofs and laws at full length, where `npm test` takes a sample of each. */
process.env.NTH_PUMP_ENDURE = '1';
process.argv.push('tests/proofs', 'tests/laws', '--testTimeout=900000');
await import('./test.mjs');
