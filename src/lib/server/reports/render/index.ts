export { UnprintableTextError } from '$lib/server/typesetting/fonts';
export { renderReport, type RenderOptions, type SignatureRequest } from './render';
