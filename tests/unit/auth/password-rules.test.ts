import { describe, expect, test } from 'vitest';
import { longestPassword, passwordRefusal, shortestPassword } from '@/lib/auth/password-rules';
import { weakPasswords, weakWords } from '@/lib/auth/weak-passwords';

const unlikely = (length: number) => 'vqzjxkwbhygfmdpc'.repeat(20).slice(0, length);

describe('a new password', () => {
  test('has at least 8 characters (OWASP ASVS 5.0, 6.2.1)', () => {
    expect(passwordRefusal(unlikely(shortestPassword - 1))).toContain('This has 7 characters');
    expect(passwordRefusal(unlikely(shortestPassword))).toBeNull();
    expect(passwordRefusal(unlikely(shortestPassword + 1))).toBeNull();
  });

  test('may be long: 64 at least must be possible (ASVS 6.2.9), and 256 are', () => {
    expect([64, longestPassword - 1, longestPassword].map((length) => passwordRefusal(unlikely(length)))).toEqual([
      null,
      null,
      null,
    ]);
    expect(passwordRefusal(unlikely(longestPassword + 1))).toContain('use at most 256');
  });

  test('is counted in characters, not in code units', () => {
    expect(passwordRefusal('🔧🛞🏍🪛🔩⛽🧰')).toContain('This has 7 characters');
    expect(passwordRefusal('🔧🛞🏍🪛🔩⛽🧰🛢')).toBeNull();
  });

  test('needs no mixture of letters, digits and marks (ASVS 6.2.5)', () => {
    expect(passwordRefusal('drain plug left of the sump')).toBeNull();
    expect(passwordRefusal('ölfilterschlüssel hängt links')).toBeNull();
  });

  test.each([
    'password',
    'Password1',
    'PASSWORD2024!',
    'p4ssw0rd',
    'P@ssw0rd!',
    '12345678',
    '87654321',
    'abcdefgh',
    'aaaaaaaa',
    'abababab',
    'qwertyuiop',
    'letmein123',
    '1q2w3e4r',
    'motorcycle99',
    'sunshine!!',
    'dragondragon',
    'iloveyou2',
    '2024summer',
  ])('%s is refused as guessed first', (password) => {
    expect(passwordRefusal(password)).toContain('guessed first');
  });

  test.each(['witnessmark', 'Witnessmark1', 'witness-mark', 'mywitnessmark'])(
    '%s is refused as the name of this site',
    (password) => {
      expect(passwordRefusal(password)).toContain('name of this site');
    },
  );

  test.each(['vandersloot', 'Imke.Vandersloot', 'imkevandersloot7', 'vandersloot@post', 'imke@post.example'])(
    '%s is refused to Imke Vandersloot, imke@post.example',
    (password) => {
      const about = { name: 'Imke Vandersloot', email: 'imke@post.example' };
      expect(passwordRefusal(password, about)).toContain('your name or your e-mail address');
      expect(passwordRefusal(`${password} in the garage`, about)).toBeNull();
    },
  );

  test('the shipped list has no entry the rules would not find', () => {
    expect(weakWords.size + weakPasswords.size).toBeGreaterThan(300);
    for (const password of [...weakPasswords, ...weakWords].filter(({ length }) => length >= shortestPassword)) {
      expect(passwordRefusal(password), password).not.toBeNull();
    }
  });
});
