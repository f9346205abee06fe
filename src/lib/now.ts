/** The device's clock. Read when a person does something (a reading, a press), never while drawing; a stale figure is none. */
export const now = (): Date => new Date();

/** That instant as records write it (RFC 3339, UTC). */
export const nowText = (): string => now().toISOString();
