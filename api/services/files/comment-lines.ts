/** Lines before the header of a CSV, each marked as a comment. A line break inside one would end the comment, so it becomes a space. */
export const commentLines = (lines: readonly string[]): string => lines.map((line) => `# ${line.replaceAll(/\s+/g, ' ')}\r\n`).join('');
