import type { BrowserContext } from 'playwright-core';
import { ask, clientId } from './browser.ts';
import type { SignedInPerson } from './people.ts';

interface DraftPage {
  readonly draft: { readonly revision: number };
  readonly hash: string;
}

/** Acts of people who are not under test, straight at the server. */
export class Scene {
  readonly url: string;
  constructor(url: string) {
    this.url = url;
  }

  /** Writes a text into a new draft (of a change, where `changes` names the recipe); gives the draft's id. */
  async write(who: SignedInPerson, text: string, changes?: string): Promise<string> {
    const body = { requestId: clientId(), ...(changes === undefined ? {} : { changes }) };
    const { id } = await ask<{ id: string }>(who.context, 'POST', `${this.url}/api/drafts`, body);
    await this.save(who, id, text);
    return id;
  }

  async save(who: SignedInPerson, id: string, text: string): Promise<void> {
    const { revision } = await this.seen(who.context, id);
    const body = { saveId: clientId(), baseRevision: revision, text };
    await ask(who.context, 'PUT', `${this.url}/api/drafts/${id}/text`, body);
  }

  async send(who: SignedInPerson, id: string, note: string): Promise<void> {
    await ask(who.context, 'POST', `${this.url}/api/drafts/${id}/send`, {
      ...(await this.seen(who.context, id)),
      note,
    });
  }

  async takeBack(who: SignedInPerson, id: string): Promise<void> {
    await ask(who.context, 'POST', `${this.url}/api/drafts/${id}/take-back`, await this.seen(who.context, id));
  }

  async signOff(who: SignedInPerson, id: string): Promise<void> {
    const { ticks } = await ask<{ ticks: string[] }>(who.context, 'GET', `${this.url}/api/reviews/${id}`);
    const body = { ...(await this.seen(who.context, id)), ticks, note: '' };
    await ask(who.context, 'POST', `${this.url}/api/reviews/${id}/sign-off`, body);
  }

  /** Brings a text from nothing to version 1: written by one person, signed by another. */
  async publish(writer: SignedInPerson, signer: SignedInPerson, text: string): Promise<void> {
    const id = await this.write(writer, text);
    await this.send(writer, id, 'The first version.');
    await this.signOff(signer, id);
  }

  /** Keeps a design on version 1 of a shunt recipe at this current, as its page showed it there. */
  async keepDesign(
    who: SignedInPerson,
    design: { slug: string; name: string; amperes: number; visibility: 'team' | 'only me' },
  ): Promise<string> {
    const { amperes, ...named } = design;
    const volts = 20 * amperes * 0.01;
    const results = { V_out: { text: `${volts.toFixed(3)}\u2009V`, low: volts, high: volts } };
    const { id } = await ask<{ id: string }>(who.context, 'POST', `${this.url}/api/designs`, {
      requestId: clientId(),
      ...named,
      version: 1,
      project: 'Works car',
      note: 'Beside the controller.',
      inputs: { shunt: { I: `${amperes} A` } },
      shown: { engine: 1, calculators: { shunt: { results, limits: { 'meter range': 'within' } } } },
    });
    return id;
  }

  /** What an act on the draft must name: revision and hash of its text now. */
  async seen(context: BrowserContext, id: string) {
    const { draft, hash } = await ask<DraftPage>(context, 'GET', `${this.url}/api/drafts/${id}`);
    return { requestId: clientId(), revision: draft.revision, hash };
  }
}
