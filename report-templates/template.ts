import type { ReportModel } from '$lib/report';
import type { DocumentKit, Node } from '$lib/server/reports/render/kit';

export interface LayoutOptions {
	/** True for a preview: watermarked, unsigned, without a code. */
	draft: boolean;
	/** The claimed time of signing; null where the document is not signed. */
	signedAt: string | null;
}

export interface Layout {
	content: Node[];
	header: (page: number, pages: number) => Node | undefined;
	footer: (page: number, pages: number) => Node;
	background: (page: number) => Node;
}

/** A folder below `report-templates/` exports one of these as `template` from its `layout.ts`. */
export interface Template {
	id: string;
	/** What the document calls itself: "Client memo". */
	kind: string;
	description: string;
	layout(kit: DocumentKit, model: ReportModel, options: LayoutOptions): Promise<Layout>;
}
