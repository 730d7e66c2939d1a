"""What a spec sheet says: bytes in, validated readings out. `read_sheet` is the one door."""
