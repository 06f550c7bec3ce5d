import { expect, it } from 'vitest';
import { History } from '../../src/workbench/page/history.ts';

it('steps go back and forth, and a new one after a step back forgets what was undone', () => {
  const history = new History('a');
  history.put('b');
  history.put('c');
  history.undo();
  expect([history.present, history.canUndo, history.canRedo]).toEqual(['b', true, true]);
  history.redo();
  expect([history.present, history.canRedo]).toEqual(['c', false]);
  history.undo();
  history.undo();
  history.undo();
  expect([history.present, history.canUndo]).toEqual(['a', false]);
  history.put('d');
  history.redo();
  expect([history.present, history.canRedo]).toEqual(['d', false]);
});

it('what one movement does is one step back; another movement, or a rest between, is another', () => {
  const history = new History(0);
  for (const value of [1, 2, 3]) history.put(value, 'gain');
  for (const value of [4, 5]) history.put(value, 'wind');
  history.rest();
  history.put(6, 'wind');
  const back: number[] = [];
  while (history.canUndo) {
    history.undo();
    back.push(history.present);
  }
  expect(back).toEqual([5, 3, 0]);
});

it('a movement that goes on after a step back does not take that step with it', () => {
  const history = new History(0);
  history.put(1, 'gain');
  history.put(2, 'gain');
  history.undo();
  history.put(3, 'gain');
  history.undo();
  expect(history.present).toBe(0);
});
