/** A file's size for reading, in decimal units: "812 bytes", "34 kB", "1.2 MB". */
export function formatBytes(bytes: number): string {
	if (bytes < 1000) return `${bytes} bytes`;
	if (bytes < 999_500) return `${Math.round(bytes / 1000)} kB`;
	return `${(bytes / 1_000_000).toFixed(1)} MB`;
}
