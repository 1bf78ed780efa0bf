import * as z from 'zod';

/** The number people see: `LW-0412`. */
export const captureNumberSchema = z.string().regex(/^LW-\d{4,9}$/, 'not a number such as LW-0412');
