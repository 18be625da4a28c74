"""Templates for strutbook workbooks, and the program that builds them."""
