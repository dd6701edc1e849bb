/** Counted in characters. No rule on the make-up of a password (NIST SP 800-63B, 5.1.1.2: at least 8 characters, no composition rules). */
export const PASSWORD_LENGTH = { least: 10, most: 200 } as const
