"""The terminal skin: parse, one library call, render, exit code. No logic lives here."""
