"""Items become values, findings, gaps and a verdict."""
