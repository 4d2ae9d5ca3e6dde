/**
 * Built-in functions that read and compute and do nothing else, by name. Taken from the server's own catalog
 * (pg_proc, version 18): every overload immutable or stable, names that are meant to be called by people.
 */
const STABLE = `
	abs acos age any_value array_agg array_append array_cat array_dims array_fill array_length array_lower
	array_ndims array_position array_positions array_prepend array_remove array_replace array_to_json
	array_to_string array_upper ascii asin atan atan2 avg bit_and bit_count bit_length bit_or bit_xor bool_and
	bool_or btrim cardinality cbrt ceil ceiling char_length character_length chr col_description concat
	concat_ws convert_from convert_to corr cos cot count covar_pop covar_samp cume_dist current_database
	current_schema current_schemas current_setting date_add date_bin date_part date_subtract date_trunc decode
	degrees dense_rank div encode enum_first enum_last enum_range every exp extract factorial family
	first_value floor format format_type gcd generate_series generate_subscripts get_bit get_byte
	has_any_column_privilege has_column_privilege has_database_privilege has_function_privilege
	has_schema_privilege has_sequence_privilege has_table_privilege has_tablespace_privilege
	has_type_privilege hashtext host hostmask inet_client_addr inet_client_port inet_server_addr
	inet_server_port initcap isempty isfinite json_agg json_array_elements json_array_elements_text
	json_array_length json_build_array json_build_object json_each json_each_text json_extract_path
	json_extract_path_text json_object json_object_agg json_object_keys json_populate_record
	json_populate_recordset json_strip_nulls json_to_record json_to_recordset json_typeof jsonb_agg
	jsonb_array_elements jsonb_array_elements_text jsonb_array_length jsonb_build_array jsonb_build_object
	jsonb_each jsonb_each_text jsonb_extract_path jsonb_extract_path_text jsonb_insert jsonb_object
	jsonb_object_agg jsonb_object_keys jsonb_path_exists jsonb_path_match jsonb_path_query
	jsonb_path_query_array jsonb_path_query_first jsonb_populate_record jsonb_populate_recordset jsonb_pretty
	jsonb_set jsonb_strip_nulls jsonb_to_record jsonb_to_recordset jsonb_typeof justify_days justify_hours
	justify_interval lag last_value lcm lead left length like ln log log10 lower lower_inc lower_inf lpad
	ltrim make_date make_interval make_time make_timestamp make_timestamptz masklen max md5 min min_scale mod
	mode netmask network normalize notlike now nth_value ntile num_nonnulls num_nulls obj_description
	octet_length overlaps overlay parse_ident percent_rank percentile_cont percentile_disc pg_backend_pid
	pg_client_encoding pg_column_compression pg_column_size pg_conf_load_time pg_describe_object
	pg_encoding_to_char pg_function_is_visible pg_get_constraintdef pg_get_expr pg_get_function_arguments
	pg_get_function_identity_arguments pg_get_function_result pg_get_functiondef pg_get_indexdef
	pg_get_partition_constraintdef pg_get_partkeydef pg_get_ruledef pg_get_serial_sequence
	pg_get_statisticsobjdef pg_get_statisticsobjdef_columns pg_get_statisticsobjdef_expressions
	pg_get_triggerdef pg_get_userbyid pg_get_viewdef pg_has_role pg_index_column_has_property
	pg_index_has_property pg_lsn pg_mcv_list_items pg_my_temp_schema pg_options_to_table pg_partition_root
	pg_postmaster_start_time pg_relation_filenode pg_relation_filepath pg_size_bytes pg_size_pretty
	pg_stat_get_activity pg_stat_get_dead_tuples pg_stat_get_last_analyze_time
	pg_stat_get_last_autoanalyze_time pg_stat_get_last_autovacuum_time pg_stat_get_last_vacuum_time
	pg_stat_get_live_tuples pg_stat_get_mod_since_analyze pg_stat_get_numscans pg_stat_get_progress_info
	pg_table_is_visible pg_tablespace_location pg_type_is_visible pg_typeof pg_wal_lsn_diff pg_walfile_name
	phraseto_tsquery pi plainto_tsquery position pow power quote_ident quote_literal quote_nullable radians
	range_agg range_merge rank regexp_count regexp_instr regexp_like regexp_match regexp_matches
	regexp_replace regexp_split_to_array regexp_split_to_table regexp_substr regr_avgx regr_avgy regr_count
	regr_intercept regr_r2 regr_slope repeat replace reverse right round row_number row_to_json rpad rtrim
	scale set_bit set_byte setweight sha224 sha256 sha384 sha512 shobj_description sign sin sinh split_part
	sqrt starts_with statement_timestamp stddev stddev_pop stddev_samp string_agg string_to_array
	string_to_table strip strpos substr substring sum tan timezone to_ascii to_char to_date to_hex to_json
	to_jsonb to_number to_timestamp to_tsquery to_tsvector transaction_timestamp translate trim_array
	trim_scale trunc ts_headline ts_lexize ts_rank ts_rank_cd tsvector_to_array unnest upper upper_inc
	upper_inf var_pop var_samp variance version websearch_to_tsquery width_bucket xmlagg xpath
`;

/** Volatile, because their answer changes from call to call; they still only read. */
const VOLATILE = `
	clock_timestamp currval gen_random_uuid lastval pg_blocking_pids pg_current_wal_flush_lsn
	pg_current_wal_insert_lsn pg_current_wal_lsn pg_database_size pg_get_backend_memory_contexts
	pg_indexes_size pg_is_in_recovery pg_is_wal_replay_paused pg_last_wal_receive_lsn pg_last_wal_replay_lsn
	pg_last_xact_replay_timestamp pg_lock_status pg_partition_ancestors pg_partition_tree pg_relation_size
	pg_safe_snapshot_blocking_pids pg_table_size pg_tablespace_size pg_total_relation_size random timeofday
	uuidv4 uuidv7
`;

const names = (text: string) => new Set(text.trim().split(/\s+/));
const stable = names(STABLE);
const volatile = names(VOLATILE);

/** Whether the built-in function of this name is known to read and compute only. */
export function readsOnly(functionName: string): boolean {
	return stable.has(functionName) || volatile.has(functionName);
}

/** Whether its value is the same throughout a statement: a column's default by it needs no rewrite. */
export function isStable(functionName: string): boolean {
	return stable.has(functionName);
}
