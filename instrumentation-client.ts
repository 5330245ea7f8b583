import { config } from 'zod';

// Runs in the browser before any page's code. Without this, zod tries whether it may make code from text; the pages' content
// policy forbids that, and every visit would be reported as a breach.
config({ jitless: true });
