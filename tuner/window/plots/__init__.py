"""The four live plots: pure numbers for ticks, ranges and marks, and the items that paint them."""
