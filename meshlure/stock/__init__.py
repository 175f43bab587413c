"""What a maker buys or fishes in: materials, waters, hardware, balls, and the cautions that go with them."""
