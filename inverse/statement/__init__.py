"""From draws to the statement: capacity of parts, guaranteed loads, margins, verdict."""
