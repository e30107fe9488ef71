"""Step 9: rules and board in, findings with three-valued verdicts out."""
