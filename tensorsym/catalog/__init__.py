"""Named properties as data rows: law, symbol, unit, conventions, cautions, source."""
