/** What a screen reader is told of changes that happen away from the focus; the layout holds the live region. */
class Announcer {
  text = $state('');

  /** Says a sentence once the reader is free. The same sentence twice in a row is said twice. */
  say(sentence: string): void {
    this.text = this.text === sentence ? `${sentence}\u00a0` : sentence;
  }
}

export const announcer = new Announcer();
