import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { attachment, cleanFileName } from './file-name';

describe('cleanFileName', () => {
	it.each([
		['Data sheet.pdf', 'Data sheet.pdf'],
		['../../etc/passwd', 'passwd.pdf'],
		['C:\\Users\\me\\sheet.PDF', 'sheet.pdf'],
		['%2e%2e%2fsheet.pdf', '_2e_2e_2fsheet.pdf'],
		['CON', '_CON.pdf'],
		['con.pdf', '_con.pdf'],
		['LPT1.tar.pdf', '_LPT1.tar.pdf'],
		['sheet\u202Efdp.exe', 'sheetfdp.exe.pdf'],
		['a\r\nSet-Cookie: x=1.pdf', 'a Set-Cookie_ x=1.pdf'],
		['', 'file.pdf'],
		['...', 'file.pdf'],
		['.pdf', 'pdf.pdf'],
		['Dachfläche Süd.pdf', 'Dachfläche Süd.pdf'],
		['\u{1f31e}.pdf', '\u{1f31e}.pdf']
	])('reads %j as %j', (given, cleaned) => {
		expect(cleanFileName(given, 'application/pdf')).toBe(cleaned);
	});

	it('keeps a long name within 120 characters, and its ending', () => {
		const name = cleanFileName('x'.repeat(300), 'image/png');
		expect(name).toHaveLength(120);
		expect(name.endsWith('.png')).toBe(true);
	});

	it('leaves nothing that could lead out of a folder or a header, for any name', () => {
		fc.assert(
			fc.property(fc.string({ unit: 'binary', maxLength: 300 }), (given) => {
				const name = cleanFileName(given, 'application/pdf');
				expect(name).not.toMatch(/[/\\<>:"|?*%]|\p{Cc}|\p{Cf}|\p{Cs}/u);
				expect(name.endsWith('.pdf')).toBe(true);
				expect(name.length).toBeGreaterThan(4);
				expect(cleanFileName(name, 'application/pdf')).toBe(name);
			})
		);
	});
});

describe('attachment', () => {
	it('says the name in ASCII and in full (RFC 6266, RFC 8187)', () => {
		expect(attachment('Dach (Süd) 1.pdf')).toBe(
			`attachment; filename="Dach (S_d) 1.pdf"; filename*=UTF-8''Dach%20%28S%C3%BCd%29%201.pdf`
		);
	});

	it('stays one header whose name decodes to what was given, for any name', () => {
		fc.assert(
			fc.property(fc.string({ unit: 'binary' }), (name) => {
				const header = attachment(name);
				expect(header).toMatch(/^attachment; filename="[^"\\]*"; filename\*=UTF-8''[A-Za-z0-9!_.~%-]*$/);
				expect(header).toMatch(/^[\x20-\x7e]*$/);
				expect(decodeURIComponent(header.split("''")[1] ?? '')).toBe(name.toWellFormed());
			})
		);
	});
});
