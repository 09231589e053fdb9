import { beginHistory, changed, redone, undone } from '@/lib/client/region-history';

describe('undo and redo', () => {
  test('go back through the changes and forward again', () => {
    const two = changed(changed(beginHistory('a'), 'b', 'region', 1000), 'c', 'leaveOut', 1100);
    const one = undone(two);
    expect([one.now, undone(one).now, redone(one).now]).toEqual(['b', 'a', 'c']);
    expect(redone(redone(undone(undone(two)))).now).toBe('c');
  });

  test('stop at both ends', () => {
    const start = beginHistory('a');
    expect(undone(start)).toBe(start);
    expect(redone(start)).toBe(start);
  });

  test('a drag is one step, two drags are two', () => {
    let history = beginHistory(0);
    for (let i = 1; i <= 20; i += 1) history = changed(history, i, 'region', 1000 + 30 * i);
    expect(history.past).toEqual([0]);
    history = changed(history, 99, 'region', 5000);
    expect(history.past).toEqual([0, 20]);
  });

  test('a change after undoing drops what was undone', () => {
    const history = changed(undone(changed(beginHistory('a'), 'b', 'x', 1)), 'c', 'x', 2);
    expect([history.now, history.future]).toEqual(['c', []]);
    expect(undone(history).now).toBe('a');
  });

  test('are bounded', () => {
    let history = beginHistory(0);
    for (let i = 1; i <= 500; i += 1) history = changed(history, i, 'region', 1000 * i);
    expect(history.past.length).toBe(100);
    expect(history.past[0]).toBe(400);
  });
});
