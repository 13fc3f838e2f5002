import { expect, it } from 'vitest';
import { oneSentence } from './one-sentence.js';

it('joins sentences, keeps what stands in quotation marks, and ends with a full stop', () => {
  expect(oneSentence('“a. Box.stl” is packed. Unpack it first.')).toBe(
    '“a. Box.stl” is packed; unpack it first.',
  );
  expect(oneSentence('It is empty')).toBe('It is empty.');
  expect(oneSentence('One\nline only!')).toBe('One line only!');
  expect(oneSentence('It holds 1.5 mm. STL files have no unit.')).toBe(
    'It holds 1.5 mm; STL files have no unit.',
  );
  expect(oneSentence('4 edges are open. 24 facets repeat. A plan needs more.')).toBe(
    '4 edges are open; 24 facets repeat; a plan needs more.',
  );
});
