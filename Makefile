# The one door. `make run` and `make test` need Python 3.11 or later, make and git; they bring the rest.
.PHONY: setup run test check bench lock
PYTHON_HERE = .venv/bin/python

setup:
	@.ci/setup

# PORT=8010 asks for one port; without it the first free one from 8000 on is taken.
run: setup
	@$(PYTHON_HERE) manage.py run $(if $(PORT),--port $(PORT))

# ONLY=tests/house runs a part of the tests.
test:
	@.ci/setup with-test-tools
	@$(MAKE) --no-print-directory check
	$(PYTHON_HERE) -m pytest -n 2 $(ONLY)

check: setup
	.venv/bin/ruff check .
	.venv/bin/ruff format --check .
	.venv/bin/lint-imports --no-logo

bench: setup
	@$(PYTHON_HERE) tests/speed/run.py

lock:
	@.ci/lock
