// Replaced by generated sources.
