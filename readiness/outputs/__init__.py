"""An assessment is shown: terminal, JSON, gap list, page, binder. Nothing is computed here."""
