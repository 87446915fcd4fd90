/** The Markdown cells of a Jupyter notebook (nbformat 4). */
export interface NotebookCell {
  /** Zero-based position among all cells. */
  readonly index: number;
  readonly text: string;
}

export function markdownCells(json: string): readonly NotebookCell[] {
  let notebook: unknown;
  try {
    notebook = JSON.parse(json);
  } catch {
    return [];
  }
  const cells = typeof notebook === 'object' && notebook !== null && 'cells' in notebook && Array.isArray(notebook.cells) ? (notebook.cells as unknown[]) : [];
  return cells.flatMap((cell, index) => {
    if (typeof cell !== 'object' || cell === null || !('cell_type' in cell) || cell.cell_type !== 'markdown' || !('source' in cell)) return [];
    const { source } = cell;
    const text = Array.isArray(source) ? source.filter((line): line is string => typeof line === 'string').join('') : typeof source === 'string' ? source : '';
    return text === '' ? [] : [{ index, text }];
  });
}
