import { serialsOf } from '@/lib/client/serials';

describe('serials out of text', () => {
  test.each([
    ['one a line', 'LM-1\nLM-2\r\nLM-3', ['LM-1', 'LM-2', 'LM-3']],
    ['one line with commas', 'LM-1, LM-2 ,LM-3', ['LM-1', 'LM-2', 'LM-3']],
    ['pasted from a table', 'LM-1\tred\nLM-2\tred', ['LM-1', 'LM-2']],
    ['a CSV with heading and quotes', '\uFEFFSerial;Note\n"LM-1";"a, b"\n"LM-2";', ['LM-1', 'LM-2']],
    ['doubles', 'LM-1\nLM-1\nLM-2', ['LM-1', 'LM-2']],
    ['nothing', ' \n ', []],
  ])('%s', (_name, text, serials) => expect(serialsOf(text)).toEqual(serials));
});
