/** A console error is a defect nobody asserted: it fails the test that wrote it. */
let written: string[] = [];

beforeEach(() => {
  written = [];
  jest.spyOn(console, 'error').mockImplementation((...parts: unknown[]) => {
    written.push(
      parts.map((part) => (part instanceof Error ? (part.stack ?? part.message) : String(part))).join(' '),
    );
  });
});

afterEach(() => {
  jest.restoreAllMocks();
  if (written.length) throw new Error(`console.error was called:\n${written.join('\n')}`);
});
