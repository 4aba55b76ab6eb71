import { describe, expect, it } from 'vitest';
import { VerdictPost, type ActionAnswer, type SentVerdict } from './verdict-post.svelte';

const verdictOn = (name: string): SentVerdict => ({
  spectrumId: name,
  name,
  action: `/review/${name}?/verdict`,
  form: new FormData(),
});
const stored = (verdictId: string): ActionAnswer => ({ type: 'success', data: { verdictId } });
const lost: ActionAnswer = { type: 'error', error: { message: 'The server could not be reached' } };
const undone: ActionAnswer = { type: 'redirect', location: '/review/x' };
const page = (id: string | null) => () => id;

/** A transport that answers only when it is told to, and writes down what it was given. */
function slowTransport() {
  const sent: { action: string; verdictId: FormDataEntryValue | null }[] = [];
  const waiting: ((answer: ActionAnswer) => void)[] = [];
  const post = new VerdictPost((action, form) => {
    sent.push({ action, verdictId: form.get('verdictId') });
    return new Promise((resolve) => waiting.push(resolve));
  });
  const settle = () => new Promise((resolve) => setTimeout(resolve));
  const answer = async (reply: ActionAnswer) => {
    await settle();
    waiting.shift()!(reply);
    await settle();
  };
  return { post, sent, answer, settle };
}

describe('VerdictPost', () => {
  it('sends verdicts one after another in the order given', async () => {
    const { post, sent, answer, settle } = slowTransport();
    const both = [post.send(verdictOn('a')), post.send(verdictOn('b'))];
    await settle();
    expect(sent.map(({ action }) => action)).toEqual(['/review/a?/verdict']);
    expect(post.pending).toBe(2);
    await answer(stored('1'));
    expect(sent.map(({ action }) => action)).toEqual(['/review/a?/verdict', '/review/b?/verdict']);
    await answer(stored('2'));
    expect(await Promise.all(both)).toEqual([null, null]);
    expect(post.pending).toBe(0);
  });

  it('lets an undo wait for the verdict before it and name that one, whatever the page still knows', async () => {
    const { post, sent, answer, settle } = slowTransport();
    void post.send(verdictOn('a'));
    const undo = post.undo('?/undo', new FormData(), page('older'));
    const later = post.send(verdictOn('b'));
    await settle();
    expect(sent).toHaveLength(1);
    await answer(stored('1'));
    expect(sent[1]).toEqual({ action: '?/undo', verdictId: '1' });
    await answer(undone);
    expect(await undo).toEqual({ dropped: null, answer: undone });
    expect(sent[2].action).toBe('/review/b?/verdict');
    await answer(stored('2'));
    await later;
  });

  it('undoes what the page knows of where nothing was stored since', async () => {
    const { post, sent, answer } = slowTransport();
    const undo = post.undo('?/undo', new FormData(), page('older'));
    await answer(undone);
    await undo;
    expect(sent[0].verdictId).toBe('older');
  });

  it('keeps a failed verdict, goes on with the next, and sends it again on request', async () => {
    const { post, sent, answer } = slowTransport();
    const first = post.send(verdictOn('a'));
    const second = post.send(verdictOn('b'));
    await answer(lost);
    await answer(stored('2'));
    const kept = (await first)!;
    expect(await second).toBeNull();
    expect(kept).toMatchObject({ name: 'a', reason: 'The server could not be reached' });
    expect(post.unstored).toEqual([kept]);
    const again = post.sendAgain(kept);
    await answer(stored('3'));
    expect(await again).toBeNull();
    expect(post.unstored).toEqual([]);
    void post.undo('?/undo', new FormData(), page('2'));
    await answer(undone);
    expect(sent.at(-1)!.verdictId).toBe('3');
  });

  it('takes a failed verdict out instead of the one stored before it when undo meant the failed one', async () => {
    const { post, sent, answer } = slowTransport();
    void post.send(verdictOn('a'));
    void post.send(verdictOn('b'));
    const undo = post.undo('?/undo', new FormData(), page(null));
    await answer(stored('1'));
    await answer(lost);
    expect(await undo).toMatchObject({ dropped: { name: 'b' } });
    expect(post.unstored).toEqual([]);
    expect(sent).toHaveLength(2);
    void post.undo('?/undo', new FormData(), page(null));
    await answer(undone);
    expect(sent[2]).toEqual({ action: '?/undo', verdictId: '1' });
  });

  it('undoes the stored verdict first where it was given after the failed one', async () => {
    const { post, sent, answer } = slowTransport();
    void post.send(verdictOn('a'));
    void post.send(verdictOn('b'));
    await answer(lost);
    await answer(stored('2'));
    void post.undo('?/undo', new FormData(), page(null));
    await answer(undone);
    expect(sent[2].verdictId).toBe('2');
    expect(await post.undo('?/undo', new FormData(), page(null))).toMatchObject({ dropped: { name: 'a' } });
  });

  it('offers a failed verdict no more once a later one on the same spectrum is stored', async () => {
    const { post, answer } = slowTransport();
    void post.send(verdictOn('a'));
    void post.send(verdictOn('a'));
    await answer(lost);
    expect(post.unstored).toHaveLength(1);
    await answer(stored('2'));
    expect(post.unstored).toEqual([]);
  });

  it('names the same verdict again after an undo that did not reach the server', async () => {
    const { post, sent, answer } = slowTransport();
    void post.send(verdictOn('a'));
    await answer(stored('1'));
    void post.undo('?/undo', new FormData(), page(null));
    await answer(lost);
    void post.undo('?/undo', new FormData(), page(null));
    await answer(undone);
    expect(sent.map(({ verdictId }) => verdictId)).toEqual([null, '1', '1']);
  });
});
