"""File formats: each reader turns bytes into a `Document` of tables and lines. Nothing here knows what a crystal is."""
