#include "report/supports.h"

#include "model/model.h"

static const sct_joint *joint_of(const sct_result *result, int joint)
{
    return result->model != NULL ? &result->model->joints[joint] : NULL;
}

static bool gives_by_spring(const sct_joint *joint, bool is_turn, int axis)
{
    for (int i = 0; joint != NULL && i < joint->n_springs; i++) {
        if (joint->springs[i].is_turn == is_turn && joint->springs[i].dir[axis] != 0) return true;
    }
    return false;
}

bool sct_support_gives_force(const sct_result *result, int joint, int axis)
{
    const sct_joint_result *j = &result->joints[joint];
    for (int i = 0; i < j->n_held; i++) {
        if (j->held[i][axis] != 0) return true;
    }
    return gives_by_spring(joint_of(result, joint), false, axis);
}

bool sct_support_gives_moment(const sct_result *result, int joint, int axis)
{
    const sct_joint *j = joint_of(result, joint);
    for (int i = 0; j != NULL && i < j->n_turns_held; i++) {
        if (j->turns_held[i][axis] != 0) return true;
    }
    return gives_by_spring(j, true, axis);
}

bool sct_support_gives_any(const sct_result *result, int joint)
{
    const sct_joint *j = joint_of(result, joint);
    return result->joints[joint].n_held > 0 || (j != NULL && j->n_turns_held + j->n_springs > 0);
}

int sct_support_turns_held(const sct_result *result, int joint)
{
    const sct_joint *j = joint_of(result, joint);
    return j != NULL ? j->n_turns_held : 0;
}
