import { fail } from '@sveltejs/kit';
import { uuidParam } from '$lib/domain/identifiers';
import {
  chosenNoteSchema,
  editedNoteSchema,
  newNoteSchema,
  resolvedNoteSchema,
} from '$lib/domain/notes';
import { readForm } from '$lib/server/forms';
import { board } from '$lib/server/note-board';
import * as notes from '$lib/server/notes';
import { whoAsks } from '$lib/server/teams';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => ({
  moleculeId: params.id,
  board: await board(whoAsks(locals), uuidParam(params.id)),
});

/** The first thing that is wrong with a form, and the text that was written into it. */
const faultOf = (errors: Record<string, string>, text = '') =>
  fail(400, { fault: Object.values(errors)[0] ?? 'The form cannot be read.', text });

export const actions: Actions = {
  write: async ({ locals, params, request }) => {
    const form = await readForm(request, newNoteSchema);
    if (form.data === null) return faultOf(form.faults.errors, form.faults.values['text']);
    await notes.write(whoAsks(locals), uuidParam(params.id), form.data);
  },

  edit: async ({ locals, request }) => {
    const form = await readForm(request, editedNoteSchema);
    if (form.data === null) return faultOf(form.faults.errors);
    await notes.edit(whoAsks(locals), form.data.note, form.data.text);
  },

  remove: async ({ locals, request }) => {
    const form = await readForm(request, chosenNoteSchema);
    if (form.data === null) return faultOf(form.faults.errors);
    await notes.remove(whoAsks(locals), form.data.note);
  },

  resolve: async ({ locals, request }) => {
    const form = await readForm(request, resolvedNoteSchema);
    if (form.data === null) return faultOf(form.faults.errors);
    await notes.resolve(whoAsks(locals), form.data.note, form.data.resolved);
  },
};
