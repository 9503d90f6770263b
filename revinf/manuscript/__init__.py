"""From the documents people have to claims and coordinates; knows no statistics."""
