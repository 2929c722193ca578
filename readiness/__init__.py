"""Planning aid for a total skin electron therapy program: feasibility, gaps, procedures."""

__version__ = "0.1.0"
