"""Solids of the sample baits, modelled in a B-rep kernel (Open CASCADE) the way a CAD program models them."""
