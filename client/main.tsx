import { render } from 'preact';
import { config } from 'zod';
import { App } from './App.tsx';

// The content security policy allows no code made at run time, so schemas must not try.
config({ jitless: true });

render(<App />, document.getElementById('page')!);
