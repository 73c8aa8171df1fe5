"""Results as text, JSON and LaTeX; no mathematics."""
