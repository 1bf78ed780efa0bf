/**
 * How long a password has to be. The contract's file of accounts has the same figures; it is not imported here, since it would
 * bring its schemas into the first page. A test compares the two.
 */
export const PASSWORD_LENGTH = { least: 12, mostBytes: 72 } as const;
