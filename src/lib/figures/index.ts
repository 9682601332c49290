export { figureSpec, type FigureOptions } from './spec';
export { figureTable, presentSeries, seriesCsv, type FigureColumn } from './series';
