"""Settings from the environment: bounded, and clear about what will not do."""

import msgspec
import pytest

from loopslack.settings import Settings, SettingsError, settings_from, settings_table


def test_an_empty_environment_gives_the_defaults():
    assert settings_from({}) == Settings()
    assert settings_from({"LOOPSLACK_NESTING": "", "HOME": "/"}) == Settings()


def test_every_setting_is_read_from_its_variable():
    settings = settings_from(
        {
            "WEB_CONCURRENCY": "4",
            "LOOPSLACK_SINGLE_BODY_BYTES": "5000",
            "LOOPSLACK_BODY_SECONDS": "2.5",
            "LOOPSLACK_CORS_ORIGINS": "https://a.example, http://localhost:3000",
            "LOOPSLACK_ACCESS_LOG": "false",
            "LOOPSLACK_LOG_LEVEL": "debug",
            "LOOPSLACK_KEYS_FILE": "/etc/loopslack/keys.toml",
        }
    )
    assert (settings.workers, settings.single_body_bytes, settings.body_seconds) == (4, 5000, 2.5)
    assert settings.cors_origins == ("https://a.example", "http://localhost:3000")
    assert (settings.access_log, settings.log_level) == (False, "debug")
    assert settings.keys_file == "/etc/loopslack/keys.toml"


@pytest.mark.parametrize(
    ("variable", "value"),
    [
        ("LOOPSLACK_SINGLE_BODY_BYTES", "many"),
        ("LOOPSLACK_SINGLE_BODY_BYTES", "0"),
        ("LOOPSLACK_SINGLE_BODY_BYTES", "1500.5"),
        ("LOOPSLACK_NESTING", "101"),
        ("LOOPSLACK_BODY_SECONDS", "nan"),
        ("LOOPSLACK_BODY_SECONDS", "inf"),
        ("LOOPSLACK_BODY_SECONDS", "-1"),
        ("LOOPSLACK_LOG_LEVEL", "loud"),
        ("LOOPSLACK_ACCESS_LOG", "perhaps"),
        ("LOOPSLACK_CORS_ORIGINS", "*"),
        ("LOOPSLACK_CORS_ORIGINS", "https://a.example/path"),
        ("WEB_CONCURRENCY", "0"),
    ],
)
def test_a_value_that_will_not_do_is_named(variable, value):
    with pytest.raises(SettingsError, match=variable):
        settings_from({variable: value})


def test_a_misspelt_variable_is_refused_with_the_one_meant():
    with pytest.raises(SettingsError, match=r"LOOPSLACK_KEY_FILE .* Did you mean LOOPSLACK_KEYS_FILE"):
        settings_from({"LOOPSLACK_KEY_FILE": "x"})


def test_variables_of_the_server_and_of_an_orchestrator_are_let_be():
    settings_from(
        {
            "LOOPSLACK_HEAD_SECONDS": "5",
            "LOOPSLACK_SERVICE_HOST": "10.0.0.1",
            "LOOPSLACK_SERVICE_PORT": "80",
            "LOOPSLACK_SERVICE_PORT_HTTP": "80",
            "LOOPSLACK_PORT": "tcp://10.0.0.1:80",
            "LOOPSLACK_PORT_80_TCP": "tcp://10.0.0.1:80",
            "LOOPSLACK_PORT_80_TCP_ADDR": "10.0.0.1",
        }
    )


def test_every_number_among_the_settings_has_both_bounds():
    for field in msgspec.structs.fields(Settings):
        schema = msgspec.json.schema(field.type)
        if schema.get("type") in ("integer", "number"):
            assert {"minimum", "maximum"} <= set(schema), field.name


def test_the_table_of_settings_has_a_row_for_each_with_its_meaning():
    rows = settings_table().splitlines()
    assert len(rows) == 2 + len(Settings.__struct_fields__)
    assert all(row.count("|") == 5 and row.endswith(". |") for row in rows[2:])
    assert "| `LOOPSLACK_NESTING` | 32 | 8 to 100 | Deepest nesting of objects and lists in a body. |" in rows
