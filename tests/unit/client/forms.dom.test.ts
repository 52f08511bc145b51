import { describe, expect, it } from 'vitest';
import PasswordField from '../../../src/components/forms/PasswordField.vue';
import SegmentedChoice from '../../../src/components/forms/SegmentedChoice.vue';
import TextField from '../../../src/components/forms/TextField.vue';
import { mountComponent, type } from './mount-component.ts';

describe('text field', () => {
  it('ties label, field and message together', async () => {
    const { query, set, unmount } = await mountComponent(TextField, {
      props: { label: 'Height', modelValue: '', unit: 'ft' },
    });
    const input = query<HTMLInputElement>('input');
    expect(query<HTMLLabelElement>('label').htmlFor).toBe(input.id);
    expect(input.hasAttribute('aria-invalid')).toBe(false);
    await set({ message: 'Must be 0 or more' });
    expect(input.getAttribute('aria-invalid')).toBe('true');
    const message = query(`#${CSS.escape(input.getAttribute('aria-describedby') ?? '')}`);
    expect(message.textContent).toContain('Must be 0 or more');
    expect(message.querySelector('svg')).not.toBeNull();
    unmount();
  });

  it('does not call a warning invalid', async () => {
    const { query, unmount } = await mountComponent(TextField, {
      props: { label: 'Height', modelValue: '1', message: 'Near the end of the data', tone: 'near' },
    });
    expect(query('input').hasAttribute('aria-invalid')).toBe(false);
    unmount();
  });

  it('hands over what is typed', async () => {
    const { query, emitted, unmount } = await mountComponent(TextField, {
      props: { label: 'Name', modelValue: '' },
      models: ['modelValue'],
    });
    await type(query<HTMLInputElement>('input'), 'Ada');
    expect(emitted['update:modelValue']).toEqual([['Ada']]);
    unmount();
  });
});

describe('password field', () => {
  it('shows and hides what was typed', async () => {
    const { query, unmount, set } = await mountComponent(PasswordField, {
      props: { label: 'Password', modelValue: 'x' },
    });
    expect(query<HTMLInputElement>('input').type).toBe('password');
    query<HTMLButtonElement>('button').click();
    await set({});
    expect(query<HTMLInputElement>('input').type).toBe('text');
    expect(query('button').getAttribute('aria-label')).toBe('Hide password');
    unmount();
  });
});

describe('segmented choice', () => {
  it('is a radio group with a name for each choice', async () => {
    const { host, emitted, unmount, query } = await mountComponent(SegmentedChoice, {
      props: {
        label: 'Units',
        modelValue: 'aviation',
        options: [
          { value: 'aviation', text: 'kt ft', title: 'Knots and feet' },
          { value: 'si', text: 'm/s m' },
        ],
      },
      models: ['modelValue'],
    });
    const radios = [...host.querySelectorAll<HTMLInputElement>('input[type=radio]')];
    expect(new Set(radios.map((radio) => radio.name)).size).toBe(1);
    expect(radios.map((radio) => radio.checked)).toEqual([true, false]);
    expect(query('legend').textContent).toBe('Units');
    expect(radios[0]!.closest('label')!.textContent).toContain('Knots and feet');
    radios[1]!.click();
    expect(emitted['update:modelValue']).toEqual([['si']]);
    unmount();
  });
});
