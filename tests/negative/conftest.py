from pathlib import Path

import pytest
from small_study import SmallStudy


@pytest.fixture
def small(tmp_path: Path) -> SmallStudy:
    return SmallStudy(tmp_path)
