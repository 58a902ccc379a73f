"""Checks against closed forms and identities that hold exactly."""
