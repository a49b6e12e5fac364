import 'server-only';
import { env } from '@/lib/env';
import { paths } from '@/lib/paths';
import type { Mail } from '@/lib/ports/mail';

const whereFrom = () => `\n\nWitnessmark at ${env.url}\n`;

export function confirmEmailMail(to: string, token: string): Mail {
  return {
    to,
    subject: 'Confirm your e-mail address for Witnessmark',
    text:
      'Somebody, most likely you, signed up for Witnessmark with this e-mail address.\n\n' +
      `Open this link within 24 hours to confirm it, then sign in:\n${env.url}${paths.confirmEmail(token)}\n\n` +
      'If it was not you, do nothing: without the link there is no account.' +
      whereFrom(),
  };
}

export function knownAccountMail(to: string, token: string): Mail {
  return {
    to,
    subject: 'You have a Witnessmark account already',
    text:
      'Somebody, most likely you, tried to sign up for Witnessmark with this e-mail address. It has an account already: ' +
      `sign in at ${env.url}${paths.signIn}\n\n` +
      `If you have forgotten your password, choose another within the hour:\n${env.url}${paths.resetPassword(token)}\n\n` +
      'If it was not you, do nothing: nothing was changed.' +
      whereFrom(),
  };
}

export function resetPasswordMail(to: string, token: string): Mail {
  return {
    to,
    subject: 'Choose another password for Witnessmark',
    text:
      'Somebody, most likely you, asked for another password for this account.\n\n' +
      `Open this link within the hour and choose one; it works once:\n${env.url}${paths.resetPassword(token)}\n\n` +
      'If it was not you, do nothing: your password stays as it is.' +
      whereFrom(),
  };
}

export function passwordChangedMail(to: string): Mail {
  return {
    to,
    subject: 'Your Witnessmark password was changed',
    text:
      'The password of your account was changed just now, and every other session was ended.\n\n' +
      `If it was not you, choose another at once: ${env.url}${paths.forgotPassword}` +
      whereFrom(),
  };
}

export function passkeyAddedMail(to: string, name: string): Mail {
  return {
    to,
    subject: 'A key was added to your Witnessmark account',
    text:
      `A key named “${name}” was added to your account just now. Statements can be signed with it in your name.\n\n` +
      `If it was not you, remove it at once and change your password: ${env.url}${paths.account}` +
      whereFrom(),
  };
}
