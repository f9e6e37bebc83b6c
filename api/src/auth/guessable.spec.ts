import { describe, expect, it } from '@jest/globals';
import { guessable } from './guessable.ts';

const about = { name: 'Marit Halvorsen', email: 'marit@halvorsen-build.example' };

describe('passwords that are easy to guess', () => {
  it.each(['123qweasdzxc', 'Leavemealone', 'password1234', 'Password1234!', 'P@ssw0rd1234', '2026sunshine2026', 'LETMEIN!!!!!', 'motherfucker'])('refuse %s as common', async (password) => {
    expect(await guessable(password, about)).toContain('first passwords');
  });

  it.each(['aaaaaaaaaaaa', 'abababababab', 'abcabcabcabc', '123456789012', '987654321098', 'qwertyuiop12', 'poiuytrewq!!', 'abcdefghijklm', 'sunshinesunshine', 'tallypoletallypole', '1111222233334444'])('refuse %s as a run', async (password) => {
    expect(await guessable(password, about)).not.toBeNull();
  });

  it.each(['Halvorsen2026', 'marithalvorsen', 'marit@halvorsen-build.example', 'Halvorsen-Build-1', 'marit halvorsen build'])('refuse %s as the person', async (password) => {
    expect(await guessable(password, about)).toContain('your name or address');
  });

  it.each(['correct horse battery staple', 'our lumber yard opens at six', 'gD7#kfo29$Lx', 'Ünser Hölzerner Türgriff', '木材を測る古い棒と新しい家の梁', '🪵🏠🔨📐🧱🪜🚪🪟🔩🪛📏🧰', 'marit counts 9 purple hammers'])('take %s', async (password) => {
    expect(await guessable(password, about)).toBeNull();
  });

  it('are told apart in no time, however long', async () => {
    const began = performance.now();
    for (const text of ['a'.repeat(255) + 'b', 'ab'.repeat(128), 'qwerty'.repeat(42), 'x1!'.repeat(85)]) await guessable(text, about);
    expect(performance.now() - began).toBeLessThan(1000);
  });
});
