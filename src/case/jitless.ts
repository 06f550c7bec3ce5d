import * as z from 'zod';

// Checks are not compiled to functions: the policy of the page forbids it, and a browser tells of every attempt.
z.config({ jitless: true });
