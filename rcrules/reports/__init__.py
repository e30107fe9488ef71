"""Step 11: the document in, a text out; one report per file."""
