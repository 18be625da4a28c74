"""Cross-sections: properties from dimensions, and sections by designation."""
