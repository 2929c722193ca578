"""Pure calculations: numbers in, numbers out, one subject a module."""
