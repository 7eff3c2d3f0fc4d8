"""Questions about many states."""
