"""The form at the terminal: questions in the order of the scene, a valid record at every moment."""
