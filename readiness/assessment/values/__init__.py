"""What each value means and which calculation gives it, one module a subject."""

from readiness.assessment.definition import Definition

ALL: tuple[Definition, ...] = ()
