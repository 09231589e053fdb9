'use client';

import { useRouter } from 'next/navigation';
import { useRef, useState, type FormEvent } from 'react';
import { When } from '@/components/figures/when';
import { Button } from '@/components/ui/button';
import { TextArea } from '@/components/ui/field';
import { useSubmit } from '@/lib/client/use-submit';
import { begunMention, type CommentView } from '@/lib/domain/comment';
import { LIMITS } from '@/lib/domain/limits';
import type { PersonRef } from '@/lib/domain/views';
import type { AddComment } from './actions';

/** What a page gives for its comments. */
export interface CommentsGiven {
  comments: readonly CommentView[];
  /** Who can be named; empty where the person only reads. */
  people: readonly PersonRef[];
  addComment: AddComment;
}

interface Props extends CommentsGiven {
  readingId: number;
}

const MOST_NAMES = 6;

/** What people said about the readings of this frame, and a place to say more. */
export function Comments({ comments, people, addComment, readingId }: Props) {
  return (
    <section className="sec" aria-labelledby="comments-head">
      <div className="cap">
        <h2 id="comments-head">Comments</h2>
        <span>{comments.length || 'none yet'}</span>
      </div>
      {comments.length ? (
        <ol className="mb-3 grid gap-3 text-small">
          {comments.map((comment) => (
            <li key={comment.id}>
              <p className="break-words whitespace-pre-line">{comment.words}</p>
              <p className="text-ink-2">
                {comment.by.name}, <When at={comment.at} />, reading {comment.reading}
              </p>
            </li>
          ))}
        </ol>
      ) : null}
      {people.length ? <CommentForm people={people} addComment={addComment} readingId={readingId} /> : null}
    </section>
  );
}

function CommentForm({ people, addComment, readingId }: Omit<Props, 'comments'>) {
  const router = useRouter();
  const [words, setWords] = useState('');
  const [said, setSaid] = useState('');
  const form = useRef<HTMLFormElement>(null);
  const submit = useSubmit<{ mailed: string[] }>();
  const begun = begunMention(words);
  const names =
    begun === null
      ? []
      : people.filter(
          ({ name }) =>
            name.toLowerCase().startsWith(begun.toLowerCase()) && name.toLowerCase() !== begun.toLowerCase(),
        );
  const name = (person: PersonRef) => {
    setWords(`${words.slice(0, words.length - (begun?.length ?? 0))}${person.name} `);
    form.current?.querySelector('textarea')?.focus();
  };
  const send = (event: FormEvent) => {
    event.preventDefault();
    submit.run(
      () => addComment({ readingId, words }),
      ({ mailed }) => {
        setWords('');
        setSaid(mailed.length ? `Said. ${mailed.join(', ')} gets a mail.` : 'Said.');
        router.refresh();
      },
    );
  };
  return (
    <form ref={form} onSubmit={send}>
      <TextArea
        label="Comment"
        labelHidden
        placeholder="A word on this reading; @ names a person"
        rows={2}
        maxLength={LIMITS.wordsLength}
        value={words}
        error={submit.fields.words ?? (submit.message || undefined)}
        onChange={(event) => {
          setWords(event.target.value);
          setSaid('');
        }}
      />
      {names.length ? (
        <div className="mt-2 flex flex-wrap gap-2" role="group" aria-label="Name a person">
          {names.slice(0, MOST_NAMES).map((person) => (
            <Button key={person.id} className="text-small" onClick={() => name(person)}>
              {person.name}
            </Button>
          ))}
        </div>
      ) : null}
      {words.trim() ? (
        <Button className="mt-2 w-full" type="submit" busy={submit.waiting}>
          Say it
        </Button>
      ) : null}
      <p className="mt-1 text-small text-ink-2" role="status">
        {said}
      </p>
    </form>
  );
}
