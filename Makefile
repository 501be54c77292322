# The two commands that matter: `make handbook` and `make test`. Each sets up what it needs.

PYTHON ?= python3
ENVIRONMENT := .venv
BIN := $(ENVIRONMENT)/bin
INSTALL := $(BIN)/python -m pip install --quiet --disable-pip-version-check --constraint constraints.txt
# Both stamps fall out of date with the lists of requirements and versions, and with nothing else.
READY := $(ENVIRONMENT)/ready-to-press
READY_TO_TEST := $(ENVIRONMENT)/ready-to-test
SUPPLY := $(ENVIRONMENT)/supply

.DEFAULT_GOAL := help
.PHONY: help handbook proof test bench sbom audit-deps clean

help: ## what can be made
	@sed -n 's/^\([a-z-]*\):.*## \(.*\)/  make \1\t\2/p' Makefile | expand -t 18

handbook: $(READY) ## publish the handbook of materials/ into site/
	@$(BIN)/sheetgen press materials --into site

proof: $(READY) ## check the records of materials/ and publish nothing
	@$(BIN)/sheetgen proof materials

test: $(READY_TO_TEST) ## check the style of the code and run every test
	@$(BIN)/ruff check --no-cache .
	@PYTHONDONTWRITEBYTECODE=1 $(BIN)/python -m pytest -q -p no:cacheprovider -n auto --dist loadgroup

bench: $(READY_TO_TEST) ## time the parts that have a benchmark
	@for file in benchmarks/*.py; do echo "$$file"; $(BIN)/python "$$file" || exit 1; done

sbom: $(READY) $(SUPPLY) ## write dist/sbom.json, the bill of materials (CycloneDX) of the environment
	@mkdir -p dist
	@$(SUPPLY)/bin/cyclonedx-py environment $(BIN)/python --pyproject pyproject.toml --output-reproducible \
	  --output-format JSON --output-file dist/sbom.json
	@echo "dist/sbom.json"

audit-deps: $(SUPPLY) ## hold the exact versions of constraints.txt against known vulnerabilities
	@$(SUPPLY)/bin/pip-audit --strict --no-deps --disable-pip --requirement constraints.txt

clean: ## remove the environment, the caches and the published site
	rm -rf $(ENVIRONMENT) build dist .pytest_cache .ruff_cache .hypothesis
	git clean -qfdX site

$(READY): pyproject.toml constraints.txt | $(BIN)/python
	@echo "Installing sheetgen into $(ENVIRONMENT) …"
	@$(INSTALL) --editable .
	@touch $@

$(READY_TO_TEST): pyproject.toml constraints.txt | $(BIN)/python
	@echo "Installing sheetgen and its tests into $(ENVIRONMENT) …"
	@$(INSTALL) --editable '.[test]'
	@touch $@ $(READY)

# Apart from the environment that they look at, so that they are no part of it.
$(SUPPLY): | $(BIN)/python
	@$(BIN)/python -m venv $@
	@$@/bin/python -m pip install --quiet --disable-pip-version-check cyclonedx-bom==7.5.0 pip-audit==2.10.1

$(BIN)/python:
	@$(PYTHON) -c 'import sys; v = sys.version.split()[0]; v_ok = sys.version_info >= (3, 11); \
	  v_ok or sys.exit(f"sheetgen needs Python 3.11 or later and $(PYTHON) is {v}: make PYTHON=python3.12 …")'
	@$(PYTHON) -m venv $(ENVIRONMENT)
