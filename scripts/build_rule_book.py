"""Make formcheck/hazards/data/book.json from the files of hazard_rules/.

Run it after any change there: `python scripts/build_rule_book.py`. A test holds the bundle fresh.
"""

from __future__ import annotations

import json

from formcheck.files_out import write_text
from formcheck.hazards.book import built_in_folder, load_book, rule_files
from formcheck.hazards.bundle import BUNDLE, bundle_of
from formcheck.hazards.vocabulary import FILE_NAME


def main() -> None:
    folder = built_in_folder()
    load_book(bundle={})  # refuses what is wrong before it is bundled
    BUNDLE.parent.mkdir(exist_ok=True)
    bundle = bundle_of([folder / FILE_NAME, *rule_files(folder)])
    write_text(BUNDLE, json.dumps(bundle, ensure_ascii=False, separators=(",", ":"), sort_keys=True) + "\n")
    print(f"{len(bundle)} files in {BUNDLE.name}")


if __name__ == "__main__":
    main()
