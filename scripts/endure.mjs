/** npm run endure: the proofs and laws at full length, where `npm test` takes a sample of each; or only those named. */
process.env.NTH_PUMP_ENDURE = '1';
if (process.argv.length < 3) process.argv.push('tests/proofs', 'tests/laws');
process.argv.push('--testTimeout=900000');
await import('./test.mjs');
