import { config } from 'zod';

// The content security policy allows no code made at run time. Schemas look for it as they are made, so this comes first.
config({ jitless: true });
