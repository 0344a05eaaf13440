"""The cure clock: weather, front, stages, movement while green, two-part cure, by-products in a room."""
