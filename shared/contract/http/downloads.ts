import * as z from 'zod';

/** `path`: of a download below `/api`, with its query, such as `/decodes/12/log?check=30`. */
export const newTicketSchema = z.strictObject({ path: z.string().min(1).max(300) });
export type NewTicket = z.infer<typeof newTicketSchema>;

/** An address that works once and soon ends; the browser may follow it without a token. */
export const ticketSchema = z.object({ url: z.string(), expiresAt: z.string() });
export type Ticket = z.infer<typeof ticketSchema>;
