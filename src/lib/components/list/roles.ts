/*
 * Roles of a table's parts, spread onto tables of the class `stack`: on a narrow screen these become blocks, and some
 * browsers then forget that they are a table.
 */
export const table = { role: 'table' } as const;
export const group = { role: 'rowgroup' } as const;
export const row = { role: 'row' } as const;
export const head = { role: 'columnheader' } as const;
export const rowHead = { role: 'rowheader' } as const;
export const cell = { role: 'cell' } as const;
