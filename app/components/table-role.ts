/** The roles of a table's parts, spelled out because some browsers drop them once parts are laid out as blocks. */
export const TABLE_ROLE = {
  rowgroup: { role: 'rowgroup' },
  rowheader: { role: 'rowheader' },
  cell: { role: 'cell' },
} as const;
