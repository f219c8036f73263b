//! Enumeration of designs, dominance, the pricing oracle.
