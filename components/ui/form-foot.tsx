import { Button } from './button';

interface Props {
  word: string;
  waiting: boolean;
  message?: string;
  onBack: () => void;
  disabled?: boolean;
}

/** The end of a form: what is wrong with the whole, the one button, and the way back. */
export function FormFoot({ word, waiting, message, onBack, disabled }: Props) {
  return (
    <div className="form-foot">
      {message ? (
        <p className="help wrong w-full" role="alert">
          {message}
        </p>
      ) : null}
      <Button kind="main" type="submit" busy={waiting} disabled={disabled}>
        {word}
      </Button>
      <Button kind="quiet" onClick={onBack}>
        Back
      </Button>
    </div>
  );
}
