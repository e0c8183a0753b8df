(** * The steps of a path and of a cycle

    What holds for every list of distinct things, before any graph is looked at. *)

From Coq Require Import Bool List Permutation Arith Lia.
From Certify Require Import Statement.
Import ListNotations.

Section Steps.

Context {V : Type}.
Implicit Types (h l m : list V) (u v : V).

Lemma path_steps_cons : forall u v l,
  path_steps (u :: v :: l) = (u, v) :: path_steps (v :: l).
Proof. reflexivity. Qed.

(** A path, cut at one of its vertices. *)
Lemma path_steps_app : forall l v m,
  path_steps (l ++ v :: m) = path_steps (l ++ [v]) ++ path_steps (v :: m).
Proof.
  induction l as [| x l IH]; intros v m; [reflexivity |].
  destruct l as [| y l]; [reflexivity |].
  cbn [app]. rewrite !path_steps_cons. cbn [app]. f_equal. apply (IH v m).
Qed.

Lemma path_steps_fst : forall l v, map fst (path_steps (l ++ [v])) = l.
Proof.
  induction l as [| x l IH]; intros v; [reflexivity |].
  destruct l as [| y l]; [reflexivity |].
  cbn [app]. rewrite path_steps_cons. cbn [map fst]. f_equal. apply IH.
Qed.

Lemma path_steps_snd : forall l v, map snd (path_steps (v :: l)) = l.
Proof.
  induction l as [| x l IH]; intros v; [reflexivity |].
  rewrite path_steps_cons. cbn [map snd]. f_equal. apply IH.
Qed.

Lemma cycle_steps_fst : forall h, map fst (cycle_steps h) = h.
Proof. intros [| x l]; [reflexivity |]. apply path_steps_fst. Qed.

Lemma cycle_steps_snd : forall h, Permutation (map snd (cycle_steps h)) h.
Proof.
  intros [| x l]; [constructor |]. cbn [cycle_steps app].
  rewrite path_steps_snd. symmetry. apply Permutation_cons_append.
Qed.

Lemma cycle_steps_length : forall h, length (cycle_steps h) = length h.
Proof. intros h. rewrite <- (map_length fst), cycle_steps_fst. reflexivity. Qed.

Lemma cycle_steps_in : forall h u v, In (u, v) (cycle_steps h) -> In u h /\ In v h.
Proof.
  intros h u v step. split.
  - rewrite <- (cycle_steps_fst h). apply (in_map fst _ _ step).
  - apply (Permutation_in _ (cycle_steps_snd h)), (in_map snd _ _ step).
Qed.

Lemma cycle_steps_distinct : forall h, NoDup h -> NoDup (cycle_steps h).
Proof. intros h distinct. apply (NoDup_map_inv fst). now rewrite cycle_steps_fst. Qed.

(** A cycle may be said to start at any of its vertices. *)
Lemma rotate : forall h v, In v h ->
  exists l, Permutation (v :: l) h /\ Permutation (cycle_steps (v :: l)) (cycle_steps h).
Proof.
  intros h v visited. destruct (in_split _ _ visited) as (l & m & ->).
  exists (m ++ l). split; [rewrite app_comm_cons; apply Permutation_app_comm |].
  destruct l as [| x l]; [rewrite app_nil_r; apply Permutation_refl |].
  unfold cycle_steps. cbn [app]. rewrite <- !app_assoc. cbn [app].
  pose proof (path_steps_app (v :: m) x (l ++ [v])) as one.
  pose proof (path_steps_app (x :: l) v (m ++ [x])) as other.
  cbn [app] in one, other. rewrite one, other.
  apply Permutation_app_comm.
Qed.

(** At a vertex of a cycle of three or more, one step ends and one begins, and the
    vertices before and after it are two. *)
Lemma turn : forall h v, NoDup h -> 3 <= length h -> In v h ->
  exists a b, In a h /\ In b h /\ a <> b /\
    (forall c, In (v, c) (cycle_steps h) <-> c = a) /\
    (forall c, In (c, v) (cycle_steps h) <-> c = b).
Proof.
  intros h v distinct long visited.
  destruct (rotate h v visited) as (l & same & steps).
  apply (Permutation_NoDup (Permutation_sym same)) in distinct.
  rewrite <- (Permutation_length same) in long.
  destruct l as [| a l]; [cbn in long; lia |].
  destruct (@exists_last _ l) as (m & b & ->); [intros ->; cbn in long; lia |].
  assert (split : cycle_steps (v :: a :: m ++ [b])
                  = (v, a) :: path_steps (a :: m ++ [b]) ++ [(b, v)]).
  { cbn [cycle_steps app]. rewrite path_steps_cons. f_equal.
    rewrite <- app_assoc. cbn [app].
    apply (path_steps_app (a :: m) b [v]). }
  inversion_clear distinct as [| ? ? new rest].
  assert (a_visited : In a h) by (apply (Permutation_in _ same); cbn; tauto).
  assert (b_visited : In b h).
  { apply (Permutation_in _ same). right. right. apply in_or_app. cbn. tauto. }
  exists a, b. repeat split; try assumption.
  - intros ->. inversion_clear rest as [| ? ? fresh _]. apply fresh, in_or_app. cbn. tauto.
  - intros step. apply (Permutation_in _ (Permutation_sym steps)) in step.
    rewrite split in step. destruct step as [E | step]; [congruence |].
    apply in_app_or in step. destruct step as [step | [E | []]].
    + apply (in_map fst) in step.
      rewrite app_comm_cons, path_steps_fst in step. exfalso. apply new.
      rewrite app_comm_cons. apply in_or_app. now left.
    + exfalso. apply new. injection E as -> ->. rewrite app_comm_cons. apply in_or_app. cbn. tauto.
  - intros ->. apply (Permutation_in _ steps). rewrite split. now left.
  - intros step. apply (Permutation_in _ (Permutation_sym steps)) in step.
    rewrite split in step. destruct step as [E | step].
    + exfalso. apply new. injection E as -> ->. now left.
    + apply in_app_or in step. destruct step as [step | [E | []]]; [| congruence].
      apply (in_map snd) in step. rewrite path_steps_snd in step. exfalso. apply new.
      now right.
  - intros ->. apply (Permutation_in _ steps). rewrite split. right.
    apply in_or_app. cbn. tauto.
Qed.

(** No edge is used in both directions. *)
Lemma one_way : forall h u v, NoDup h -> 3 <= length h ->
  In (u, v) (cycle_steps h) -> ~ In (v, u) (cycle_steps h).
Proof.
  intros h u v distinct long forth back.
  destruct (turn h u distinct long) as (a & b & _ & _ & differ & next & before).
  - now apply cycle_steps_in in forth.
  - apply next in forth. apply before in back. congruence.
Qed.

(** A walk from inside a set to a vertex outside leaves the set. *)
Lemma path_crosses : forall (s : V -> bool) l u v,
  s u = true -> In v l -> s v = false ->
  exists a b, s a = true /\ s b = false /\ In (a, b) (path_steps (u :: l)).
Proof.
  intros s l. induction l as [| x l IH]; intros u v inside visited outside; [easy |].
  rewrite path_steps_cons. destruct (s x) eqn:x_side.
  - destruct visited as [-> | visited]; [congruence |].
    destruct (IH x v x_side visited outside) as (a & b & ? & ? & ?).
    exists a, b. cbn. tauto.
  - exists u, x. cbn. tauto.
Qed.

Lemma cycle_crosses : forall (s : V -> bool) h u v,
  In u h -> In v h -> s u = true -> s v = false ->
  exists a b, s a = true /\ s b = false /\ In (a, b) (cycle_steps h).
Proof.
  intros s h u v u_visited v_visited inside outside.
  destruct (rotate h u u_visited) as (l & same & steps).
  destruct (path_crosses s (l ++ [u]) u v inside) as (a & b & ? & ? & step); [| easy |].
  - apply (Permutation_in _ (Permutation_sym same)) in v_visited.
    destruct v_visited as [<- | ?]; apply in_or_app; cbn; tauto.
  - exists a, b. repeat split; try easy. now apply (Permutation_in _ steps).
Qed.

Lemma last_from : forall l x u, last (x :: l) u = last l x.
Proof.
  induction l as [| y l IH]; intros x u; [reflexivity |].
  change (last (x :: y :: l) u) with (last (y :: l) u). now rewrite !IH.
Qed.

(** A walk changes sides an odd number of times exactly when its ends are on different sides. *)
Lemma path_parity : forall (s : V -> bool) l u,
  Nat.odd (length (filter (fun e => xorb (s (fst e)) (s (snd e))) (path_steps (u :: l))))
  = xorb (s u) (s (last l u)).
Proof.
  intros s l. induction l as [| x l IH]; intros u.
  - cbn. now rewrite xorb_nilpotent.
  - rewrite path_steps_cons. cbn [filter fst snd].
    specialize (IH x). rewrite last_from.
    destruct (xorb (s u) (s x)) eqn:side; cbn [length]; rewrite ?Nat.odd_succ,
      <- ?Nat.negb_odd, IH; destruct (s u), (s x), (s (last l x)); easy.
Qed.

Lemma cycle_parity : forall (s : V -> bool) h,
  Nat.Even (length (filter (fun e => xorb (s (fst e)) (s (snd e))) (cycle_steps h))).
Proof.
  intros s [| u l]; [now exists 0 |].
  apply Nat.even_spec. rewrite <- Nat.negb_odd. cbn [cycle_steps app].
  rewrite path_parity, last_last, xorb_nilpotent. reflexivity.
Qed.

(** Steps of an image. *)
Lemma path_steps_map : forall (W : Type) (p : V -> W) l,
  path_steps (map p l) = map (fun e => (p (fst e), p (snd e))) (path_steps l).
Proof.
  intros W p l. induction l as [| x l IH]; [reflexivity |].
  destruct l as [| y l]; [reflexivity |].
  rewrite path_steps_cons. cbn [map fst snd] in *. rewrite <- IH. reflexivity.
Qed.

Lemma cycle_steps_map : forall (W : Type) (p : V -> W) h,
  cycle_steps (map p h) = map (fun e => (p (fst e), p (snd e))) (cycle_steps h).
Proof.
  intros W p [| x l]; [reflexivity |].
  change (path_steps (map p (x :: l) ++ map p [x])
          = map (fun e => (p (fst e), p (snd e))) (path_steps ((x :: l) ++ [x]))).
  now rewrite <- path_steps_map, map_app.
Qed.

End Steps.
