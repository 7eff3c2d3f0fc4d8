"""Chemical equations: read, balanced, and what they do over temperature."""
