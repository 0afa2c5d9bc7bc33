import { index, layout, route, type RouteConfig } from '@react-router/dev/routes';

export default [
  index('routes/home.tsx'),
  route('sign-in', 'routes/sign-in.tsx'),
  route('sign-out', 'routes/sign-out.tsx'),
  route('theme', 'routes/theme.tsx'),
  layout('routes/signed-in.tsx', [
    route('classes', 'routes/classes.tsx'),
    route('classes/:classId', 'routes/class.tsx'),
    route('classes/:classId/settings', 'routes/class-settings.tsx'),
    route('classes/:classId/records', 'routes/class-records.tsx'),
    route('classes/:classId/change', 'routes/class-change.tsx'),
    route('changes', 'routes/changes.tsx'),
    route('changes/:changeId', 'routes/change.tsx'),
    route('alarms/:alarmId/clear', 'routes/alarm-clear.tsx'),
    route('log', 'routes/log-find-asset.tsx'),
    route('log/:assetId', 'routes/log-failure.tsx'),
    route('log/:assetId/reading', 'routes/log-reading.tsx'),
    route('assets/:assetId/fitted', 'routes/asset-fitted.tsx'),
    route('failures/:failureId', 'routes/failure.tsx'),
    route('imports', 'routes/imports.tsx'),
    route('imports/new', 'routes/import-upload.tsx'),
    route('imports/:importId', 'routes/import-preview.tsx'),
    route('imports/:importId/rejected.csv', 'routes/import-rejected-csv.ts'),
    route('nights', 'routes/nights.tsx'),
  ]),
  route('*', 'routes/not-found.tsx'),
] satisfies RouteConfig;
