import { inject } from 'vitest';

// The settings that every integration test runs with; a database for each worker.
process.env['DATABASE_URL'] = `${inject('databasePrefix')}${process.env['VITEST_POOL_ID'] ?? '1'}`;
process.env['RIGWRIGHT_BASE_URL'] = 'http://localhost:4321';
process.env['RIGWRIGHT_SECRET'] = 'a secret for tests only, long enough';
process.env['STRIPE_SECRET_KEY'] = 'sk_test_integration';
process.env['STRIPE_WEBHOOK_SECRET'] = 'whsec_integration';
process.env['STRIPE_API_URL'] = 'http://127.0.0.1:9';
process.env['SMTP_URL'] = 'smtp://127.0.0.1:9';
process.env['MAIL_FROM'] = 'Thistledown Radio Works <works@thistledown.example>';
process.env['LOG_LEVEL'] ??= 'silent';
