"""The room's addresses."""

from django.urls import path

from .views import act_forms, acts, due, files, intervals, jobs

app_name = "work"
JOB = "jobs/<int:number>/"
urlpatterns = [
    path("due/", due.due, name="due"),
    path("engines/<int:engine>/intervals/", intervals.intervals, name="intervals"),
    path("engines/<int:engine>/intervals/new/", intervals.new_interval, name="new_interval"),
    path("intervals/<int:pk>/change/", intervals.change_interval, name="change_interval"),
    path("intervals/<int:pk>/stop/", intervals.stop_interval, name="stop_interval"),
    path("intervals/<int:pk>/done/", intervals.record_done, name="record_done"),
    path("intervals/<int:pk>/put-off/", intervals.defer, name="defer"),
    path("jobs/", jobs.jobs, name="jobs"),
    path("jobs/new/", jobs.new_job, name="new_job"),
    path("jobs/states/", jobs.states, name="states"),
    path("jobs/time.csv", files.time_csv, name="all_time"),
    path("jobs/parts.csv", files.parts_csv, name="all_parts"),
    path(JOB, jobs.job, name="job"),
    path(f"{JOB}time.csv", files.time_csv, name="time"),
    path(f"{JOB}parts.csv", files.parts_csv, name="parts"),
    path(f"{JOB}tasks/add/", act_forms.add_task, name="add_task"),
    path(f"{JOB}tasks/<int:pk>/start/", acts.start_task, name="start_task"),
    path(f"{JOB}tasks/<int:pk>/finish/", act_forms.finish_task, name="finish_task"),
    path(f"{JOB}tasks/<int:pk>/witnessed/", act_forms.witnessed, name="witnessed"),
    path(f"{JOB}locks/take/", acts.take_lock, name="take_lock"),
    path(f"{JOB}locks/<int:pk>/lift/", acts.lift_lock, name="lift_lock"),
    path(f"{JOB}parts-used/", act_forms.use_part, name="use_part"),
    path(f"{JOB}closing-up/", acts.open_item, name="open_item"),
    path(f"{JOB}closing-up/<int:pk>/close/", acts.close_item, name="close_item"),
    path(f"{JOB}closing-up/<int:pk>/explain/", act_forms.explain_item, name="explain_item"),
    path(f"{JOB}hand-over/", act_forms.hand_over, name="hand_over"),
    path(f"{JOB}hand-over/<int:pk>/take/", acts.take_over, name="take_over"),
    path(f"{JOB}stop-short/", act_forms.stop_short, name="stop_short"),
    path(f"{JOB}resume/", acts.resume, name="resume"),
    path(f"{JOB}finish/", acts.finish_measuring, name="finish_measuring"),
    path(f"{JOB}drop/", act_forms.drop, name="drop"),
]
