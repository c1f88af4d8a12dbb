import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import * as z from 'zod';
import type { TeamSettings } from '#api';
import { useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { Checkbox, TextArea, TextField } from '../../ui/field.tsx';
import { useEndpointForm } from '../../ui/use-endpoint-form.ts';
import { teamReading } from './queries.ts';
import { ReadSection } from './read-section.tsx';

export function SettingsTab() {
  const team = useQuery(teamReading);
  return (
    <ReadSection query={team} label="Reading the settings">
      {(settings) => <SettingsForm settings={settings} />}
    </ReadSection>
  );
}

/** 42.4 V peak is where the language's hazard rules begin at the latest; a team may begin earlier. */
const HAZARD_MOST = 42.4;

const settingsForm = z.object({
  name: z.string().trim().min(1, 'Write a name for the team.').max(100, 'Use at most 100 characters.'),
  timeZone: z.string().trim().refine(isTimeZone, 'This is not a time zone; zones are named like Europe/Lisbon.'),
  hazardVolts: z
    .string()
    .trim()
    .refine(
      (typed) => Number(typed) > 0 && Number(typed) <= HAZARD_MOST,
      `Write volts, above 0 and at most ${HAZARD_MOST}.`,
    )
    .transform(Number),
  allowSelfSignOff: z.boolean(),
  backupNote: z.string().max(500, 'Use at most 500 characters.'),
  mailNote: z.string().max(500, 'Use at most 500 characters.'),
  purposes: listOfNames(60),
  topics: listOfNames(200),
});

function isTimeZone(name: string): boolean {
  try {
    return new Intl.DateTimeFormat('en', { timeZone: name }).format(0) !== '';
  } catch {
    return false;
  }
}

function linesOf(typed: string): string[] {
  return typed
    .split('\n')
    .map((line) => line.trim())
    .filter((line) => line !== '');
}

function listOfNames(most: number) {
  return z
    .string()
    .refine((typed) => linesOf(typed).every((line) => line.length <= 60), 'Use at most 60 characters in a line.')
    .refine((typed) => linesOf(typed).length <= most, `Use at most ${most} lines.`)
    .transform(linesOf);
}

function SettingsForm({ settings }: { settings: TeamSettings }) {
  const update = useAct('team.update', ['team.read', 'team.audit', 'me.read']);
  const [isKept, setKept] = useState(false);
  const form = useEndpointForm({
    schema: settingsForm,
    defaultValues: {
      name: settings.name,
      timeZone: settings.timeZone,
      hazardVolts: String(settings.hazardVolts),
      allowSelfSignOff: settings.allowSelfSignOff,
      backupNote: settings.backupNote,
      mailNote: settings.mailNote,
      purposes: settings.purposes.join('\n'),
      topics: settings.topics.join('\n'),
    },
    send: (values) => {
      setKept(false);
      return update.act({ body: values });
    },
    onDone: () => {
      setKept(true);
      announce('Settings kept');
    },
  });
  return (
    <form aria-label="Settings of the team" noValidate onSubmit={form.onSubmit} className="grid max-w-[720px] gap-5">
      <div className="grid gap-5 sm:grid-cols-2">
        <TextField label="Name of the team" {...form.field('name')} />
        <TextField
          label="Time zone"
          hint="Due dates are days in this zone."
          list="time-zones"
          {...form.field('timeZone')}
        />
        <datalist id="time-zones">
          {Intl.supportedValuesOf('timeZone').map((zone) => (
            <option key={zone} value={zone} />
          ))}
        </datalist>
      </div>
      <Checkbox
        label="Authors may sign off what they wrote"
        hint="For a team of one. The title block then says “signed off by its author”."
        {...form.field('allowSelfSignOff')}
      />
      <TextField
        label="Recipes must carry a caution from this voltage on, in volts"
        hint="At most 42.4 V peak (30 V RMS). It starts a warning and never means that less is safe."
        inputMode="decimal"
        {...form.field('hazardVolts')}
      />
      <TextArea
        label="Where backups go"
        hint="In your own words, for whoever has to find them."
        {...form.field('backupNote')}
      />
      <TextArea
        label="Mail"
        hint="Which server sends it, or how links are handed over while none does."
        {...form.field('mailNote')}
      />
      <div className="grid gap-5 sm:grid-cols-2">
        <TextArea label="Purposes, one a line" rows={8} {...form.field('purposes')} />
        <TextArea label="Topics, one a line" rows={8} {...form.field('topics')} />
      </div>
      {form.refusal !== null && <Failure lead="Not kept.">{form.refusal.message}</Failure>}
      {form.mending !== null && <p className="field-error">{form.mending}</p>}
      <div className="flex items-center gap-4">
        <Button kind="main" type="submit" acting="Keeping" isActing={form.isSending}>
          Keep settings
        </Button>
        {isKept && <span className="text-green">Kept.</span>}
      </div>
    </form>
  );
}
