"""The project around the book: settings, commands, documents."""
