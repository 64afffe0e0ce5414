"""The pages of the engines: everybody signed in sees them; who may change what stands with each."""
