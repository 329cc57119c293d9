// The whole URL map. Who may use which URL stands in app/http/rules.ts; a URL without a rule there is refused.
import { index, layout, type RouteConfig, route } from '@react-router/dev/routes'

export default [
  index('routes/home.ts'),

  route('sign-in', 'routes/auth/sign-in.tsx'),
  route('auth/start', 'routes/auth/start.ts'),
  route('auth/callback', 'routes/auth/callback.ts'),
  route('sign-out', 'routes/auth/sign-out.ts'),
  route('preferences', 'routes/preferences.ts'),
  route('health', 'routes/health.ts'),

  layout('routes/shell.tsx', [
    route('projects', 'routes/projects/list.tsx'),
    route('projects/:projectId', 'routes/projects/project.tsx'),
    route('projects/:projectId/compare', 'routes/projects/compare.tsx'),
    route('projects/:projectId/bench-data', 'routes/projects/bench-data.tsx'),
    route('projects/:projectId/records/:recordId', 'routes/projects/record.tsx'),
    route('projects/:projectId/history', 'routes/projects/history.tsx'),

    route('studies/:studyId', 'routes/studies/layout.tsx', [
      index('routes/studies/stage.ts'),
      route('define', 'routes/studies/define.tsx'),
      route('run', 'routes/studies/run.tsx'),
      route('explore', 'routes/studies/explore.tsx'),
      route('decide', 'routes/studies/decide.tsx'),
      route('optimum', 'routes/studies/optimum.tsx'),
      route('changes', 'routes/studies/changes.tsx'),
      route('points/:point', 'routes/studies/point.tsx'),
    ]),

    route('library', 'routes/library/library.tsx'),
    route('library/fluids/:fluidId', 'routes/library/fluid.tsx'),
    route('library/methods/:methodId', 'routes/library/method.tsx'),
    route('library/validation', 'routes/library/validation.tsx'),

    route('account', 'routes/account/account.tsx'),
    route('notices', 'routes/account/notices.tsx'),
    route('caught-mail', 'routes/account/caught-mail.tsx'),

    layout('routes/admin/layout.tsx', [
      route('admin/operations', 'routes/admin/operations.tsx'),
      route('admin/people', 'routes/admin/people.tsx'),
      route('admin/audit', 'routes/admin/audit.tsx'),
    ]),
  ]),
  route('mail/stop/:token', 'routes/account/stop-mail.tsx'),

  // Resource routes: JSON and files, no page.
  route('studies/:studyId/preview', 'routes/studies/preview.ts'),
  route('studies/:studyId/study.json', 'routes/studies/study-file.ts'),
  route('runs/:runId/progress', 'routes/runs/progress.ts'),
  route('runs/:runId/points', 'routes/runs/points.ts'),
  route('runs/:runId/plot', 'routes/runs/plot.ts'),
  route('runs/:runId/workbook.xlsx', 'routes/runs/workbook.ts'),
  route('runs/:runId/points.csv', 'routes/runs/points-csv.ts'),
  route('projects/:projectId/compare.csv', 'routes/projects/compare-csv.ts'),
  route('studies/:studyId/views', 'routes/studies/views.ts'),
  route('admin/audit.csv', 'routes/admin/audit-csv.ts'),
  route('api/v1/evaluate', 'routes/api/evaluate.ts'),
  route('api/v1/studies/check', 'routes/api/check-study.ts'),

  route('*', 'routes/not-found.tsx'),
] satisfies RouteConfig
