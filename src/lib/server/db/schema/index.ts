export * from './accounts';
export * from './organisations';
export * from './dossiers';
export * from './reports';
export * from './workers';
