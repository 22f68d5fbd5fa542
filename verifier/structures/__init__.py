"""What an instance consists of: character, sequence, graph."""
