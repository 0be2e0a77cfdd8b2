//! Reference elements of the exchange format: node order, shape functions, maps, quadrature rules.
