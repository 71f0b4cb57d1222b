import { z } from 'zod';

// Zod compiles objects with new Function unless told not to, and even its probe is reported by a content security policy
// without 'unsafe-eval'. It looks when the first object schema is made: whoever makes schemas for the page takes z from here.
z.config({ jitless: true });

export { z };
