import { classes } from './classes';

export interface UserTextProps {
  children: string;
  /** Keeps the line breaks a person typed. */
  isMultiline?: boolean;
}

/** Text a person typed. Isolated, so that its writing direction cannot reorder the words around it. */
export function UserText({ children, isMultiline }: UserTextProps) {
  return <bdi className={classes('break-words', isMultiline && 'whitespace-pre-line')}>{children}</bdi>;
}
