import { describe, expect, test } from 'vitest';
import { formValues, typedValues } from '@/lib/auth/form-values';

function form(...pairs: [string, string | Blob][]): FormData {
  const data = new FormData();
  for (const [name, value] of pairs) data.append(name, value);
  return data;
}

describe('what a form sends', () => {
  test('is read by name, and a name that ends in [] is a list however many there are', () => {
    expect(formValues(form(['name', 'Imke'], ['tasks[]', 'oil']))).toEqual({ name: 'Imke', 'tasks[]': ['oil'] });
  });

  test('of two values under a plain name the last counts', () => {
    expect(formValues(form(['isHot', 'no'], ['isHot', 'yes']))).toEqual({ isHot: 'yes' });
  });

  test('leaves out files and the framework’s own fields', () => {
    expect(formValues(form(['$ACTION_ID_1', 'x'], ['file', new Blob(['x'])]))).toEqual({});
  });

  test('comes back to the form without any password, token or secret', () => {
    const typed = typedValues({
      email: 'imke@post.example',
      password: 'a',
      newPassword: 'b',
      token: 'c',
      'tasks[]': ['a', 'b'],
    });
    expect(typed).toEqual({ email: 'imke@post.example', 'tasks[]': 'a\nb' });
  });
});
