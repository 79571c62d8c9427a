"""Shock incident triage: static discharge or electrical fault, and what happens next."""

__version__ = "0.1.0"
