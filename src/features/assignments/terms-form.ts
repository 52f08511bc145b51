import { z } from 'zod';
import { passRuleSchema, type Assignment } from '#shared/contracts/assignments.ts';
import { fieldsOf, ownZone } from './due-words.ts';

/** What the fields of the form hold, as text where the field does; kept on this machine as a draft. */
export const termsFormSchema = z.object({
  what: z.string(),
  title: z.string(),
  words: z.string(),
  opensDay: z.string(),
  opensTime: z.string(),
  dueDay: z.string(),
  dueTime: z.string(),
  tries: z.string(),
  passRule: passRuleSchema,
  practice: z.boolean(),
  byMail: z.boolean(),
  calendar: z.boolean(),
  reminder: z.boolean(),
  tellAuthor: z.boolean(),
});
export type TermsForm = z.infer<typeof termsFormSchema>;

const pad = (value: number): string => String(value).padStart(2, '0');

/** A form as it opens: due in a week at 17:00. */
export function freshTerms(now: Date): TermsForm {
  const due = new Date(now.getFullYear(), now.getMonth(), now.getDate() + 7);
  return {
    what: '',
    title: '',
    words: '',
    opensDay: '',
    opensTime: '08:00',
    dueDay: `${due.getFullYear()}-${pad(due.getMonth() + 1)}-${pad(due.getDate())}`,
    dueTime: '17:00',
    tries: '3',
    passRule: 'one',
    practice: true,
    byMail: true,
    calendar: true,
    reminder: true,
    tellAuthor: false,
  };
}

export const REMINDER_DAYS = 2;

/** The form of an assignment that is changed, by the clock of the reader. */
export function termsOfAssignment(assignment: Assignment): TermsForm {
  const zone = ownZone();
  const [due, opens] = [fieldsOf(assignment.dueAt, zone), fieldsOf(assignment.opensAt, zone)];
  return {
    what: '',
    title: assignment.title,
    words: assignment.words,
    opensDay: opens.day,
    opensTime: opens.time,
    dueDay: due.day,
    dueTime: due.time,
    tries: assignment.tries === null ? '' : String(assignment.tries),
    passRule: assignment.passRule,
    practice: assignment.practice,
    byMail: assignment.byMail,
    calendar: assignment.calendar,
    reminder: assignment.reminderDays !== null,
    tellAuthor: assignment.tellAuthor,
  };
}

/** What is sent. An empty number of tries means as many as wanted; an empty opening day means at once. */
export function termsBody(form: TermsForm) {
  return {
    title: form.title.trim(),
    words: form.words.trim(),
    zone: ownZone(),
    ...(form.opensDay === '' ? {} : { opens: `${form.opensDay}T${form.opensTime}` }),
    due: `${form.dueDay}T${form.dueTime}`,
    tries: form.tries.trim() === '' ? null : Number(form.tries),
    passRule: form.passRule,
    practice: form.practice,
    byMail: form.byMail,
    calendar: form.calendar,
    reminderDays: form.reminder ? REMINDER_DAYS : null,
    tellAuthor: form.tellAuthor,
  };
}
