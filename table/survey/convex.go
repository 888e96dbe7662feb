package survey

import "cavitywright/table"

// ConvexityOf is the convexity alone, for those who ask it of many tables.
func ConvexityOf(t *table.Table) Convexity { return convexityOf(t) }
