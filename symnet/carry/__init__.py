"""H taken elsewhere: second-order factors, arrays, source code, discrete time."""
