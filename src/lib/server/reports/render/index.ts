export { UnprintableTextError } from '$lib/server/typesetting/fonts';
export { unprintableText } from './printable';
export { renderReport, type RenderOptions, type SignatureRequest } from './render';
