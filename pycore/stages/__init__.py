"""The stages of the trade. Each takes the job and the results before it and returns one frozen dataclass."""
