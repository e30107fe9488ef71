"""Step 6: a structure and its parameter columns in, solved cases and bounds out."""
