"""Fast exact kernels, each with a naive counterpart in the tests."""
