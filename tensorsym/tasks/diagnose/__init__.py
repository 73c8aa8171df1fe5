"""Why numbers disagree with a crystal: hypotheses tried, weighed and named."""
