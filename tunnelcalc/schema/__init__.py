"""The JSON Schema of project.yaml, made from the vocabulary and from what plugins declare."""

from tunnelcalc.schema.project import SCHEMA_ID, project_schema, schema_text

__all__ = ["SCHEMA_ID", "project_schema", "schema_text"]
