"""One file a document: from an assessment to worded, rounded context."""
