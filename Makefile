# The one door. `make run` and `make test` need Python 3.11 or later, make and git; they bring the rest.
.PHONY: setup run demo serve test check bench lock
PYTHON_HERE = .venv/bin/python

setup:
	@.ci/setup

# The demo, an invented workshop: loaded when it isn't there, kept with what you do in it.
# PORT=8010 asks for one port; without it the first free one from 8000 on is taken.
run: setup
	@$(PYTHON_HERE) manage.py run $(if $(PORT),--port $(PORT))

# The demo afresh: what was done in it is thrown away.
demo: setup
	@$(PYTHON_HERE) manage.py demo --afresh
	@$(PYTHON_HERE) manage.py run $(if $(PORT),--port $(PORT))

# A real shop's logbook.
serve: setup
	@$(PYTHON_HERE) manage.py serve $(if $(PORT),--port $(PORT))

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
